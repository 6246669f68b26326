import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { openKit } from './kit.ts';
import type { Agent, Kit } from './kit.ts';

let kit: Kit;
let maker: Agent;
let helper: Agent;
let stranger: Agent;
beforeAll(async () => {
  kit = await openKit();
  [maker, helper] = [await kit.signIn('maker'), await kit.signIn('helper')];
  stranger = await kit.signIn('owner', await kit.makeStudio(await kit.makePerson()));
});
afterAll(() => kit.close());

const SETS = '/studios/:studioId/die-sets';
const DIES = '/studios/:studioId/dies';
const circle = (widthMm: number) => ({ geometry: { shape: { kind: 'oval', widthMm, heightMm: widthMm }, rimMm: 1.5, stitchInsetMm: 2 } });
const makeSet = async (name: string, ...diameters: number[]) => (await maker.post(SETS, { name, dies: diameters.map(circle) }).expect(201)).body;

describe('die sets', () => {
  it('keep every shape and list their dies largest first, measured along the cut line', async () => {
    const set = await makeSet('Nested circles', 40, 80, 60);
    expect(set.dies.map((die: { widthMm: number }) => die.widthMm)).toEqual([80, 60, 40]);
    // A circle's area by πr²; the cut line is flattened within 0.02 mm, which takes at most 0.02 mm of the radius.
    for (const die of set.dies) {
      const r = die.widthMm / 2;
      expect(die.areaMm2).toBeLessThanOrEqual(Math.PI * r * r);
      expect(die.areaMm2).toBeGreaterThan(Math.PI * (r - 0.02) ** 2);
    }
    expect((await helper.get(`${SETS}/${set.id}`).expect(200)).body).toEqual(set);
  });

  it('say which size cannot be, and add nothing', async () => {
    const { body } = await maker.post(SETS, { name: 'Odd', dies: [{ geometry: { shape: { kind: 'rectangle', widthMm: 50, heightMm: 30, cornerRadiusMm: 16 } } }] }).expect(400);
    expect(body.errors[0]).toMatchObject({ path: 'dies.0.geometry', message: expect.stringMatching(/corner radius.*at most 15/i) });
    expect((await maker.get(`${SETS}?search=Odd`)).body.items).toEqual([]);
  });

  it('are found by name and turn up in the bin after deletion, from which they come back whole', async () => {
    const set = await makeSet('Ovals for the bin', 30);
    await maker.delete(`${SETS}/${set.id}`).expect(204);
    await maker.get(`${SETS}/${set.id}`).expect(404);
    expect((await maker.get(`${SETS}?bin=true&search=ovals`)).body.items).toHaveLength(1);
    expect((await helper.get(DIES)).body.items.map((die: { id: string }) => die.id)).not.toContain(set.dies[0].id);
    const { body: back } = await maker.post(`${SETS}/${set.id}/restore`).expect(200);
    expect(back.dies).toEqual(set.dies);
  });

  it('refuse a helper in words and do not exist for another studio', async () => {
    const set = await makeSet('Ours', 30);
    expect((await helper.post(SETS, { name: 'Mine' }).expect(403)).body.detail).toMatch(/maker/i);
    await stranger.get(`${SETS}/${set.id}`).expect(404);
    await stranger.patch(`${DIES}/${set.dies[0].id}`, { version: 1, owned: 9 }).expect(404);
  });
});

describe('one die', () => {
  it('is measured again when its shape changes; a stale edit overwrites nothing', async () => {
    const set = await makeSet('One', 50);
    const [die] = set.dies;
    const geometry = { shape: { kind: 'stadium', widthMm: 70, heightMm: 30 } };
    const { body: changed } = await maker.patch(`${DIES}/${die.id}`, { version: 1, geometry, owned: 2 }).expect(200);
    expect(changed).toMatchObject({ widthMm: 70, heightMm: 30, owned: 2, version: 2, geometry });
    const late = await maker.patch(`${DIES}/${die.id}`, { version: 1, owned: 5 }).expect(409);
    expect(late.body.current).toEqual(changed);
  });

  it('goes and comes back by itself', async () => {
    const set = await makeSet('Two', 50, 40);
    await maker.delete(`${DIES}/${set.dies[0].id}`).expect(204);
    expect((await maker.get(`${SETS}/${set.id}`)).body.dies).toHaveLength(1);
    await maker.post(`${DIES}/${set.dies[0].id}/restore`).expect(200);
    expect((await maker.get(`${SETS}/${set.id}`)).body.dies).toHaveLength(2);
  });

  it('joins its set until the set is full', async () => {
    const set = await makeSet('Many', 20);
    const sixty = Array.from({ length: 60 }, (_, i) => circle(10 + i));
    expect((await maker.post(`${SETS}/${set.id}/dies`, { dies: sixty }).expect(409)).body.code).toBe('set-full');
    expect((await maker.post(`${SETS}/${set.id}/dies`, { dies: sixty.slice(1) }).expect(201)).body.dies).toHaveLength(60);
  });
});
