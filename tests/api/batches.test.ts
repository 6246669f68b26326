import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { beginBatch, layTable, STAMPS } from './batch-table.ts';
import type { Table } from './batch-table.ts';
import { openKit } from './kit.ts';
import type { Agent, Kit } from './kit.ts';

let kit: Kit, maker: Agent, helper: Agent, table: Table;
beforeAll(async () => {
  kit = await openKit();
  maker = await kit.signIn('maker');
  helper = await kit.signIn('helper');
  table = await layTable(maker);
});
afterAll(() => kit.close());

const base = '/studios/:studioId/batches';
const addLines = async (batchId: string, ...names: string[]) =>
  (await maker.post(`${base}/${batchId}/lines`, { lines: names.map((name) => ({ sentimentIds: [table.sentiments[name]] })) }).expect(201)).body;

describe('a batch', () => {
  it('begins with the studio’s own margins, its platform and a run sheet halved from the cardstock until it lies in the bed', async () => {
    const batch = await beginBatch(maker, 'Spring cards', { designs: 2, people: 5, spares: 3 });
    expect(batch).toMatchObject({ cards: 13, state: 'chosen', platformId: table.platformId, marginMm: 5, gapMm: 3, turns: 'auto', aim: 'time', lineItems: [], plan: null });
    // 215.9 × 279.4 halves to 139.7 × 215.9, which is longer than the bed of 160 × 170, and then to 107.95 × 139.7.
    expect([batch.sheetWidthMm, batch.sheetHeightMm]).toEqual([107.95, 139.7]);
  });

  it('is found by name, filtered by state, binned and brought back', async () => {
    const batch = await beginBatch(maker, 'Only once called this');
    const found = (await helper.get(`${base}?search=only%20once`).expect(200)).body;
    expect(found.items.map((b: { id: string }) => b.id)).toEqual([batch.id]);
    expect((await helper.get(`${base}?search=only%20once&state=finished`).expect(200)).body.total).toBe(0);
    await maker.delete(`${base}/${batch.id}`).expect(204);
    await maker.get(`${base}/${batch.id}`).expect(404);
    expect((await maker.get(`${base}?bin=true`).expect(200)).body.items[0].id).toBe(batch.id);
    await maker.post(`${base}/${batch.id}/restore`).expect(200);
    await maker.get(`${base}/${batch.id}`).expect(200);
  });

  it('answers a stale edit with what stands there now and overwrites nothing', async () => {
    const batch = await beginBatch(maker, 'First name');
    await maker.patch(`${base}/${batch.id}`, { version: 1, name: 'Second name' }).expect(200);
    const { body } = await maker.patch(`${base}/${batch.id}`, { version: 1, name: 'Third name' }).expect(409);
    expect(body).toMatchObject({ code: 'stale', current: { name: 'Second name', version: 2 } });
  });

  it('is copied with its labels and without its plans', async () => {
    const batch = await beginBatch(maker, 'To copy');
    await addLines(batch.id, 'Hello', 'Thank you');
    const copy = (await maker.post(`${base}/${batch.id}/copy`, { name: 'The copy' }).expect(201)).body;
    expect(copy.lineItems.map((line: { title: string }) => line.title)).toEqual(['Hello', 'Thank you']);
    expect(copy).toMatchObject({ name: 'The copy', state: 'chosen', plan: null });
    expect(copy.lineItems[0].id).not.toBe(batch.id);
  });

  it('lets a helper look and refuses her changes in words', async () => {
    const batch = await beginBatch(maker, 'Looked at');
    await helper.get(`${base}/${batch.id}`).expect(200);
    const { body } = await helper.post(`${base}/${batch.id}/lines`, { lines: [] }).expect(403);
    expect(body.code).toBe('forbidden');
  });
});

describe('labels of a batch', () => {
  it('share the cards evenly, the odd ones to the first', async () => {
    const batch = await beginBatch(maker, 'Shared', { people: 14 });
    await addLines(batch.id, 'Hello', 'Thank you', 'With love', 'Just a note');
    const { body } = await maker.post(`${base}/${batch.id}/spread`).expect(200);
    expect(body.lineItems.map((line: { quantity: number }) => line.quantity)).toEqual([4, 4, 3, 3]);
    expect(body.labels).toBe(14);
  });

  it('take one ink and cardstock for all, and keep an ink of their own', async () => {
    const batch = await beginBatch(maker, 'Inked');
    await addLines(batch.id, 'Hello', 'Thank you');
    const inked = (await maker.post(`${base}/${batch.id}/for-all`, { inkId: table.inks.blue, cardstockId: table.cardstocks.white, overs: 1 }).expect(200)).body;
    const [hello] = inked.lineItems;
    const { body } = await maker.patch(`${base}/${batch.id}/lines/${hello.id}`, { version: hello.version, pieces: [{ sentimentId: table.sentiments.Hello, inkId: table.inks.black }] }).expect(200);
    expect(body.lineItems.map((line: { overs: number; cardstockId: string; pieces: { inkId: string }[] }) => [line.overs, line.cardstockId, line.pieces[0].inkId]))
      .toEqual([[1, table.cardstocks.white, table.inks.black], [1, table.cardstocks.white, table.inks.blue]]);
  });

  it('refuse stamps, inks and dies of another studio', async () => {
    const batch = await beginBatch(maker, 'Strangers');
    const stranger = await kit.signIn('owner', await kit.makeStudio(await kit.makePerson()));
    const other = await layTable(stranger);
    expect((await maker.post(`${base}/${batch.id}/lines`, { lines: [{ sentimentIds: [other.sentiments.Hello] }] }).expect(400)).body.code).toBe('invalid');
    const { lineItems: [line] } = await addLines(batch.id, 'Hello');
    await maker.patch(`${base}/${batch.id}/lines/${line.id}`, { version: line.version, dieId: other.dies[0].id }).expect(400);
    await maker.post(`${base}/${batch.id}/for-all`, { inkId: other.inks.blue }).expect(400);
  });

  it('keep what another has changed: a stale edit of a label is refused', async () => {
    const batch = await beginBatch(maker, 'Two at once');
    const { lineItems: [line] } = await addLines(batch.id, 'Hello');
    await maker.patch(`${base}/${batch.id}/lines/${line.id}`, { version: line.version, quantity: 5 }).expect(200);
    const { body } = await maker.patch(`${base}/${batch.id}/lines/${line.id}`, { version: line.version, quantity: 9 }).expect(409);
    expect(body.current.lineItems[0].quantity).toBe(5);
  });
});

describe('fit of the labels', () => {
  it('gives every pair its border: half the difference of the sides for a box in a box', async () => {
    const batch = await beginBatch(maker, 'Fitted');
    await addLines(batch.id, 'Happy birthday', 'Thank you');
    const { body } = await helper.get(`${base}/${batch.id}/fit-table`).expect(200);
    expect(body.dies.map((die: { widthMm: number }) => die.widthMm)).toEqual([55, 70, 85]);
    const [birthday] = body.rows;
    // Hand-worked: 62 × 14 in 70 × 28 leaves min(4, 7) = 4 mm; in 85 × 34 min(11.5, 10) = 10 mm; in 55 × 22 nothing.
    expect(birthday.fits.map((fit: { borderMm: number }) => Number(fit.borderMm.toFixed(6)))).toEqual([-3.5, 4, 10]);
    expect(birthday.fits.map((fit: { verdict: string }) => fit.verdict)).toEqual(['no', 'good', 'roomy']);
    expect(birthday.recommendedDieId).toBe(body.dies[1].id);
  });

  it('takes all recommended dies at once and leaves alone what was chosen by hand', async () => {
    const batch = await beginBatch(maker, 'Recommended');
    const { lineItems: [birthday] } = await addLines(batch.id, 'Happy birthday', 'Thank you');
    const big = table.dies.find((die) => die.widthMm === 85)!;
    await maker.patch(`${base}/${batch.id}/lines/${birthday.id}`, { version: birthday.version, dieId: big.id }).expect(200);
    const { body } = await maker.post(`${base}/${batch.id}/recommended-dies`).expect(200);
    expect(body.lineItems[0].dieId).toBe(big.id);
    expect(body.lineItems[1].place).toMatchObject({ verdict: 'good', borderMm: 5, byHand: false });
  });

  it('moves a stamp inside its label and tells the border there; back to the best place by one word', async () => {
    const batch = await beginBatch(maker, 'Nudged');
    const { lineItems: [line] } = await addLines(batch.id, 'Thank you');
    const die = table.dies.find((one) => one.widthMm === 70)!;
    const placed = (await maker.patch(`${base}/${batch.id}/lines/${line.id}`, { version: line.version, dieId: die.id }).expect(200)).body.lineItems[0];
    expect(placed.place).toMatchObject({ centre: { x: 35, y: 14 }, borderMm: 8 });
    const moved = (await maker.patch(`${base}/${batch.id}/lines/${line.id}`, { version: placed.version, place: { centre: { x: 35, y: 10 }, rotationDeg: 0 } }).expect(200)).body.lineItems[0];
    expect(moved.place).toMatchObject({ byHand: true, borderMm: 4, boundMm: 8 });
    const back = (await maker.patch(`${base}/${batch.id}/lines/${line.id}`, { version: moved.version, place: 'fit' }).expect(200)).body.lineItems[0];
    expect(back.place).toMatchObject({ byHand: false, centre: { x: 35, y: 14 } });
  });

  it('fits combined stamps as one: heights and the gap add up', async () => {
    const batch = await beginBatch(maker, 'Combined');
    const { lineItems } = await addLines(batch.id, 'Thank you', 'Hello');
    const { body } = await maker.post(`${base}/${batch.id}/combine`, { lineIds: lineItems.map((line: { id: string }) => line.id) }).expect(200);
    expect(body.lineItems).toHaveLength(1);
    expect(body.lineItems[0].title).toBe('Thank you + Hello');
    const [line] = body.lineItems;
    const big = table.dies.find((one) => one.widthMm === 85)!;
    const placed = (await maker.patch(`${base}/${batch.id}/lines/${line.id}`, { version: line.version, dieId: big.id }).expect(200)).body.lineItems[0];
    // Under one another at the usual 4 mm: 12 + 4 + 12 = 28 high in a label of 34: (34 − 28) / 2 = 3.
    expect(STAMPS['Thank you'][1] + 4 + STAMPS.Hello[1]).toBe(28);
    expect(placed.place.borderMm).toBeCloseTo(3, 6);
  });
});
