import { afterEach, describe, expect, it } from 'vitest';
import { ref } from 'vue';
import { useRefresh, useStudioQuery } from '../../src/composables/useStudioQuery.ts';
import { useStudio } from '../../src/stores/studio.ts';
import { inComponent, settle } from './mount.ts';
import type { Mounted } from './mount.ts';

let mounted: Mounted;
afterEach(() => mounted.unmount());

/** A query whose answers wait until they are let go. */
async function ask(first: string) {
  const part = ref('a');
  const waiting = new Map<string, (fail?: Error) => void>();
  const here = await inComponent(() => {
    useStudio().id = 's1';
    const query = useStudioQuery({
      noun: 'inks', key: () => [first, part.value],
      read: (studioId) => new Promise<string>((resolve, reject) => waiting.set(part.value, (fail) => (fail ? reject(fail) : resolve(`${studioId}/${part.value}`)))),
    });
    return { query, refresh: useRefresh() };
  });
  mounted = here;
  await settle();
  const answer = async (of: string, fail?: Error) => {
    waiting.get(of)!(fail);
    await settle();
  };
  return { ...here.result, part, answer };
}

describe('data of a studio', () => {
  it('of a list stays shown while its next page comes', async () => {
    const { query, part, answer } = await ask('list');
    await answer('a');
    part.value = 'b';
    await settle();
    expect(query.data.value).toBe('s1/a');
    await answer('b');
    expect(query.data.value).toBe('s1/b');
  });

  it('of one thing never stands under the address of another', async () => {
    const { query, part, answer } = await ask('one');
    await answer('a');
    part.value = 'b';
    await settle();
    expect(query.data.value).toBeUndefined();
    await answer('b');
    expect(query.data.value).toBe('s1/b');
  });

  it('stays, with the failure beside it, when asking anew fails; and the change that asked is not failed by it', async () => {
    const { query, refresh, answer } = await ask('list');
    await answer('a');
    const refreshed = refresh('inks');
    await settle();
    await answer('a', new Error('away'));
    await expect(refreshed).resolves.toBeUndefined();
    expect([query.data.value, query.error.value?.message]).toEqual(['s1/a', 'away']);
  });
});
