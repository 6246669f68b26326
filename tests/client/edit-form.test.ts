import { afterEach, describe, expect, it, vi } from 'vitest';
import { defineComponent, h } from 'vue';
import { ApiError } from '../../src/api/api-error.ts';
import TextField from '../../src/components/fields/TextField.vue';
import { useEditForm } from '../../src/composables/useEditForm.ts';
import { useUnsavedGuard } from '../../src/composables/useUnsavedGuard.ts';
import { useNotices } from '../../src/stores/notices.ts';
import { inComponent, mountAt, settle } from './mount.ts';
import type { Mounted } from './mount.ts';

interface Row { name: string; size: { w: number | null }; version: number }
const stale = (current: Row) => new ApiError({ status: 409, code: 'stale', detail: 'Changed.', current });

let mounted: Mounted | null = null;
afterEach(() => mounted?.unmount());

const form = (save: (values: { name: string; size: { w: number | null } }, version: number) => Promise<Row>, check?: () => Record<string, string>) =>
  useEditForm({ initial: { name: 'Old', size: { w: 10 } }, version: 4, save, check });

describe('a form over one thing', () => {
  it('knows whether anything differs from what is stored, deep down and back again', () => {
    const { values, dirty } = form(vi.fn());
    values.size.w = 11;
    expect(dirty.value).toBe(true);
    values.size.w = 10;
    expect(dirty.value).toBe(false);
  });

  it('sends what was typed with the version it began from', async () => {
    const save = vi.fn(async (v) => ({ ...v, version: 5 }));
    const { values, submit, dirty } = form(save);
    values.name = 'New';
    expect(await submit()).toMatchObject({ name: 'New', version: 5 });
    expect(save).toHaveBeenCalledWith({ name: 'New', size: { w: 10 } }, 4);
    expect(dirty.value).toBe(false);
  });

  it('sends nothing while a check speaks against it', async () => {
    const save = vi.fn();
    const { submit, errors } = form(save, () => ({ name: 'Give it a name.' }));
    expect(await submit()).toBeNull();
    expect(save).not.toHaveBeenCalled();
    expect(errors.value.name).toBe('Give it a name.');
  });

  it('keeps what was typed when saving fails, with words for the form and for the field', async () => {
    const { values, submit, problem, errors, dirty } = form(async () => { throw new ApiError({ status: 400, code: 'invalid', detail: 'It is taken.', errors: [{ path: 'name', message: 'Taken.' }] }); });
    values.name = 'Taken name';
    await submit();
    expect([values.name, problem.value, errors.value.name, dirty.value]).toEqual(['Taken name', 'It is taken.', 'Taken.', true]);
  });

  it('is sent once, however often the button is pressed', async () => {
    let done!: (row: Row) => void;
    const save = vi.fn(() => new Promise<Row>((resolve) => (done = resolve)));
    const { submit } = form(save);
    const first = submit();
    expect(await submit()).toBeNull();
    done({ name: 'Old', size: { w: 10 }, version: 5 });
    expect(await first).not.toBeNull();
    expect(save).toHaveBeenCalledOnce();
  });

  it('after a stale edit overwrites nothing by itself: one way takes the other\'s, the other saves knowingly over it', async () => {
    const others = { name: 'Theirs', size: { w: 10 }, version: 9 };
    const save = vi.fn().mockRejectedValueOnce(stale(others)).mockResolvedValue({ ...others, name: 'Mine', version: 10 });
    const edit = form(save);
    edit.values.name = 'Mine';
    expect(await edit.submit()).toBeNull();
    expect(edit.theirs.value).toEqual(others);
    expect(edit.values.name).toBe('Mine');
    edit.keepMine(9);
    await edit.submit();
    expect(save).toHaveBeenLastCalledWith({ name: 'Mine', size: { w: 10 } }, 9);

    const second = form(vi.fn().mockRejectedValue(stale(others)));
    second.values.name = 'Mine';
    await second.submit();
    second.takeTheirs({ name: 'Theirs', size: { w: 10 } }, 9);
    expect([second.values.name, second.dirty.value, second.theirs.value]).toEqual(['Theirs', false, null]);
  });
});

describe('a form that cannot be sent', () => {
  it('takes the focus to its first field with words beside it, and ties the words to the field', async () => {
    mounted = await mountAt(defineComponent({
      setup() {
        const { values, errors, submit } = useEditForm({ initial: { name: 'A', note: '' }, save: vi.fn(), check: () => ({ note: 'Say something.' }) });
        return () => h('form', { onSubmit: (event: Event) => { event.preventDefault(); void submit(); } }, [
          h(TextField, { label: 'Name', modelValue: values.name, error: errors.value.name }),
          h(TextField, { label: 'Note', modelValue: values.note, error: errors.value.note }),
          h('button', { type: 'submit' }, 'Save'),
        ]);
      },
    }));
    const button = mounted.root.querySelector('button')!;
    button.focus();
    button.click();
    await settle();
    const field = document.activeElement as HTMLInputElement;
    expect(mounted.root.querySelector(`label[for="${field.id}"]`)?.textContent).toBe('Note');
    expect(document.getElementById(field.getAttribute('aria-describedby')!)?.textContent).toBe('Say something.');
  });
});

describe('leaving a page with unsaved changes', () => {
  it('asks, stays on No and goes on Yes; without changes it just goes', async () => {
    const here = await inComponent(() => {
      const edit = form(vi.fn());
      useUnsavedGuard(edit.dirty);
      return { edit, notices: useNotices() };
    });
    mounted = here;
    here.result.edit.values.name = 'Typed';
    const first = here.router.push('/elsewhere');
    await settle();
    expect(here.result.notices.question?.title).toBe('Leave without saving?');
    here.result.notices.question!.answer(false);
    await first;
    expect(here.router.currentRoute.value.path).toBe('/');

    const second = here.router.push('/elsewhere');
    await settle();
    here.result.notices.question!.answer(true);
    await second;
    expect(here.router.currentRoute.value.path).toBe('/elsewhere');
  });

  it('is asked by the browser on reload, only while there is something to lose', async () => {
    const here = await inComponent(() => {
      const edit = form(vi.fn());
      useUnsavedGuard(edit.dirty);
      return edit;
    });
    mounted = here;
    const asks = () => !window.dispatchEvent(new Event('beforeunload', { cancelable: true }));
    expect(asks()).toBe(false);
    here.result.values.name = 'Typed';
    expect(asks()).toBe(true);
    here.unmount();
    mounted = null;
    expect(asks()).toBe(false);
  });
});
