import { afterEach, describe, expect, it } from 'vitest';
import { useListQuery } from '../../src/composables/useListQuery.ts';
import { inComponent, settle } from './mount.ts';
import type { Mounted } from './mount.ts';

let mounted: Mounted;
afterEach(() => mounted.unmount());

const SORTS = [{ value: 'name', label: 'By name' }, { value: '-updated', label: 'Changed last' }] as const;
async function list(address = '/') {
  const here = await inComponent(() => useListQuery<'name' | 'updated'>({ sorts: SORTS, filters: ['tag'] }), address);
  mounted = here;
  const at = () => here.router.currentRoute.value.fullPath;
  return { ...here, list: here.result, at };
}

describe('a list\'s address', () => {
  it('is read as search, order, page, filter and bin', async () => {
    const { list: l } = await list('/?search=moss&sort=-updated&cursor=abc&tag=thanks&bin=true');
    expect(l.query.value).toEqual({ search: 'moss', sort: '-updated', cursor: 'abc', tag: 'thanks', bin: true });
    expect([l.narrowed.value, l.onFirstPage.value]).toEqual([true, false]);
  });

  it('with an unknown order falls back on the first, rather than fail', async () => {
    expect((await list('/?sort=shoe-size')).list.query.value).toEqual({ sort: 'name' });
  });

  it('begins again at the first page when search, order or filter change', async () => {
    const { list: l, at } = await list('/?cursor=abc');
    l.setSearch(' rust ');
    await settle();
    expect(at()).toBe('/?search=rust');
    l.setSort('-updated');
    await settle();
    expect(at()).toBe('/?search=rust&sort=-updated');
    l.setFilter('tag', 'thanks');
    await settle();
    expect(at()).toBe('/?search=rust&sort=-updated&tag=thanks');
    l.clear();
    await settle();
    expect(at()).toBe('/?sort=-updated');
  });

  it('says nothing of the usual order', async () => {
    const { list: l, at } = await list('/?sort=-updated');
    l.setSort('name');
    await settle();
    expect(at()).toBe('/');
  });

  it('goes on to the next page and keeps the rest', async () => {
    const { list: l, at } = await list('/?search=rust');
    l.next('p2');
    await settle();
    expect(at()).toBe('/?search=rust&cursor=p2');
  });
});
