import { afterEach, describe, expect, it } from 'vitest';
import { defineComponent, h, nextTick, ref } from 'vue';
import LengthField from '../../src/components/fields/LengthField.vue';
import { useSession } from '../../src/stores/session.ts';
import { mountAt, type } from './mount.ts';
import type { Mounted } from './mount.ts';

let mounted: Mounted;
afterEach(() => mounted.unmount());

async function field(mm: number | null, unit: 'mm' | 'in', props: Record<string, unknown> = {}) {
  const model = ref(mm);
  mounted = await mountAt(defineComponent({
    setup() {
      useSession().person = { id: '', name: '', email: '', unit };
      return () => h(LengthField, { label: 'Width', ...props, modelValue: model.value, 'onUpdate:modelValue': (value: number | null) => { model.value = value; } });
    },
  }));
  const input = mounted.root.querySelector('input')!;
  const leave = async () => {
    input.dispatchEvent(new Event('blur'));
    await nextTick();
  };
  const write = async (text: string) => {
    type(input, text);
    await nextTick();
  };
  return { model, input, write, leave, words: () => mounted.root.querySelector('.error')?.textContent ?? null, hint: () => mounted.root.querySelector('.hint')?.textContent ?? null };
}

describe('a length field', () => {
  it.each([
    ['108', 'mm', 108], ['108 mm', 'in', 108], ['4.25 in', 'mm', 107.95], ['4 1/4', 'in', 107.95], ['4-1/4"', 'mm', 107.95], ['4,25"', 'mm', 107.95], ['10.8 cm', 'mm', 108],
  ] as const)('takes %s where lengths are in %s', async (text, unit, mm) => {
    const { model, write } = await field(null, unit);
    await write(text);
    expect(model.value).toBeCloseTo(mm, 9);
  });

  it('shows a length in the person\'s unit: inches as a fraction where it is one', async () => {
    expect((await field(107.95, 'in')).input.value).toBe('4 1/4 in');
    mounted.unmount();
    expect((await field(108, 'mm')).input.value).toBe('108 mm');
  });

  it('never changes a stored length by only showing it rounded', async () => {
    const { model, input, leave } = await field(3, 'in');
    expect(input.value).toBe('0.118 in');
    await leave();
    expect(model.value).toBe(3);
  });

  it('keeps what was typed and says what is wrong, after the field is left and not before', async () => {
    const { model, input, write, leave, words } = await field(50, 'mm');
    await write('fifty');
    expect([model.value, words()]).toEqual([null, null]);
    await leave();
    expect(input.value).toBe('fifty');
    expect(words()).toContain('“fifty” is not a length');
    await write('51');
    expect([model.value, words()]).toEqual([51, null]);
  });

  it('gives a bare number its unit when left, and leaves other words as they are, with the length beside them', async () => {
    const { input, write, leave, hint } = await field(null, 'mm');
    await write('108');
    await leave();
    expect(input.value).toBe('108 mm');
    await write('4 1/4 in');
    await leave();
    expect([input.value, hint()]).toEqual(['4 1/4 in', '= 107.95 mm']);
  });

  it('follows a value that comes from elsewhere, but never its own under the fingers', async () => {
    const { model, input, write } = await field(10, 'mm');
    await write('1.');
    expect(input.value).toBe('1.');
    model.value = 20;
    await nextTick();
    await nextTick();
    expect(input.value).toBe('20 mm');
  });

  it('holds to its bounds, and may be empty only where it says so', async () => {
    const { write, leave, words, model } = await field(5, 'mm', { minMm: 2, maxMm: 30 });
    await write('1');
    await leave();
    expect([model.value, words()]).toEqual([null, 'At least 2 mm.']);
    await write('31');
    expect([model.value, words()]).toEqual([null, 'At most 30 mm.']);
    await write('');
    expect(words()).toContain('A length is needed');
    mounted.unmount();
    const optional = await field(5, 'mm', { optional: true });
    await optional.write('');
    await optional.leave();
    expect([optional.model.value, optional.words()]).toEqual([null, null]);
  });
});
