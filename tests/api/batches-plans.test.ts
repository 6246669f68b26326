import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { markPlanUsed, planForPrinting } from '../../server/features/batches/plans.queries.ts';
import { checkLayout } from '../../server/engine/gangrun/index.ts';
import { beginBatch, layTable } from './batch-table.ts';
import type { Table } from './batch-table.ts';
import { openKit } from './kit.ts';
import type { Agent, Kit } from './kit.ts';

let kit: Kit, maker: Agent, table: Table;
beforeAll(async () => {
  kit = await openKit({ jobs: true });
  maker = await kit.signIn('maker');
  table = await layTable(maker);
});
afterAll(() => kit.close());

const base = '/studios/:studioId/batches';

/** Chosen, inked, fitted: ready to be planned. */
async function ready(name: string, lines: Record<string, number>, more: object = {}) {
  const batch = await beginBatch(maker, name);
  await maker.post(`${base}/${batch.id}/lines`, { lines: Object.entries(lines).map(([title, quantity]) => ({ sentimentIds: [table.sentiments[title]], quantity })) }).expect(201);
  await maker.post(`${base}/${batch.id}/for-all`, { inkId: table.inks.blue, cardstockId: table.cardstocks.white }).expect(200);
  await maker.post(`${base}/${batch.id}/recommended-dies`, { onlyMissing: false }).expect(200);
  return (await maker.patch(`${base}/${batch.id}`, { version: 1, sheetWidthMm: 139.7, sheetHeightMm: 165.1, turns: 'none', ...more }).expect(200)).body;
}

async function planned(batchId: string, body: object = {}) {
  const { jobId } = (await maker.post(`${base}/${batchId}/plans`, body).expect(202)).body;
  const job = await kit.jobEnded(maker, jobId, 40_000);
  expect(job).toMatchObject({ state: 'done', error: null });
  const { planId } = job.result as { planId: string };
  return (await maker.get(`${base}/${batchId}/plans/${planId}`).expect(200)).body;
}

const made = (plan: { runs: { plan: { setups: { presses: { inked: { lineId: string }[] }[] }[] } }[] }) => {
  const counts = new Map<string, number>();
  for (const { lineId } of plan.runs.flatMap((run) => run.plan.setups.flatMap((setup) => setup.presses.flatMap((press) => press.inked)))) counts.set(lineId, (counts.get(lineId) ?? 0) + 1);
  return counts;
};

describe('planning a batch', () => {
  it('makes exactly what was asked for, without a fault, and says so on the batch', async () => {
    const batch = await ready('Uneven', { 'Thank you': 3, Hello: 2, 'With love': 4 });
    const plan = await planned(batch.id);
    expect([...made(plan).values()].sort()).toEqual([2, 3, 4]);
    expect(plan.labels).toBe(9);
    for (const run of plan.runs) expect(checkLayout(run.order, run.plan.setups)).toEqual([]);
    for (const key of ['setups', 'presses', 'sheets', 'cutPasses']) expect(plan.totals[key], key).toBeGreaterThanOrEqual(plan.atLeast[key]);
    const after = (await maker.get(`${base}/${batch.id}`).expect(200)).body;
    expect(after).toMatchObject({ state: 'planned', sheets: plan.totals.sheets, plan: { id: plan.id, number: 1, usedAt: null, outdated: false } });
  });

  it('needs one setup, one press a sheet, for six stamps on six cards', async () => {
    // Common practice, no source: six different labels that lie side by side are stamped by one press each sheet.
    const batch = await ready('Six of each', Object.fromEntries(['Thank you', 'Hello', 'With love', 'Just a note', 'Happy birthday', 'Congratulations'].map((name) => [name, 6])), { sheetWidthMm: 160, sheetHeightMm: 170 });
    const plan = await planned(batch.id);
    expect(plan.totals).toMatchObject({ setups: 1, presses: 6, sheets: 6 });
    expect(plan.atLeast).toMatchObject({ setups: 1, presses: 6, sheets: 6 });
  });

  it('tells what cannot be made, line by line, and plans the rest', async () => {
    const batch = await ready('Partly', { 'Thank you': 2, Hello: 2 });
    await maker.post(`${base}/${batch.id}/lines`, { lines: [{ sentimentIds: [table.wooden], quantity: 1 }, { sentimentIds: [table.sentiments['With love']], quantity: 1 }] }).expect(201);
    const plan = await planned(batch.id);
    const unplaced = plan.runs.flatMap((run: { unplaced: { title: string; code: string }[] }) => run.unplaced).map(({ title, code }: { title: string; code: string }) => [title, code]);
    expect(unplaced).toEqual([['Best wishes', 'wood-mounted'], ['With love', 'no-die']]);
    expect(plan.labels).toBe(4);
  });

  it('plans each cardstock by itself', async () => {
    const batch = await ready('Two cards', { 'Thank you': 2, Hello: 3 });
    const hello = batch.lineItems.find((line: { title: string }) => line.title === 'Hello');
    await maker.patch(`${base}/${batch.id}/lines/${hello.id}`, { version: hello.version, cardstockId: table.cardstocks.kraft }).expect(200);
    const plan = await planned(batch.id);
    expect(plan.runs.map((run: { cardstock: { name: string } }) => run.cardstock.name)).toEqual(['Smooth white', 'Brown wrap']);
    expect(plan.setups.map((setup: { number: number; position: number }) => [setup.number, setup.position])).toEqual([[1, 0], [2, 0]]);
    const { items } = (await maker.get(`${base}/${batch.id}/plans/${plan.id}/stock`).expect(200)).body;
    // 139.7 × 165.1 out of 215.9 × 279.4, halved at 139.7: two run sheets a stock sheet; two are needed, and three.
    expect(plan.runs.map((run: { plan: { totals: { sheets: number } } }) => run.plan.totals.sheets)).toEqual([2, 3]);
    expect(items.map((item: { cutPlan: { sheets: number; atLeastSheets: number } }) => [item.cutPlan.sheets, item.cutPlan.atLeastSheets])).toEqual([[1, 1], [2, 2]]);
  });

  it('cuts straight or not at all without a die and without a cut pass', async () => {
    const batch = await ready('Uncut', { 'Thank you': 2, Hello: 2 });
    for (const [i, cut] of ['straight', 'none'].entries()) {
      const now = (await maker.get(`${base}/${batch.id}`).expect(200)).body.lineItems[i];
      await maker.patch(`${base}/${batch.id}/lines/${now.id}`, { version: now.version, cut, borderMm: 4 }).expect(200);
    }
    const plan = await planned(batch.id);
    expect(plan.totals.cutPasses).toBe(0);
    expect(plan.labels).toBe(4);
  });

  it('refuses to plan without stamps or platform, in words', async () => {
    const batch = await beginBatch(maker, 'Bare');
    expect((await maker.post(`${base}/${batch.id}/plans`).expect(409)).body.code).toBe('nothing-chosen');
    await maker.patch(`${base}/${batch.id}`, { version: 1, platformId: null }).expect(200);
    expect((await maker.post(`${base}/${batch.id}/plans`).expect(409)).body.code).toBe('no-platform');
  });
});

describe('versions of a plan', () => {
  it('replace one another until one is used; then the next one is a new number and the used one stays as it was', async () => {
    const batch = await ready('Versions', { 'Thank you': 2, Hello: 2 });
    const first = await planned(batch.id);
    const second = await planned(batch.id);
    expect(second.number).toBe(1);
    await maker.get(`${base}/${batch.id}/plans/${first.id}`).expect(404);
    expect(await markPlanUsed(kit.db, kit.studioId, second.id)).toBe(true);
    const [line] = (await maker.get(`${base}/${batch.id}`).expect(200)).body.lineItems;
    await maker.patch(`${base}/${batch.id}/lines/${line.id}`, { version: line.version, quantity: 5 }).expect(200);
    expect((await maker.get(`${base}/${batch.id}`).expect(200)).body.plan).toMatchObject({ number: 1, outdated: true });
    const third = await planned(batch.id);
    expect(third.number).toBe(2);
    expect(third.changes).toContain('“Thank you”: 5 instead of 2.');
    const kept = (await maker.get(`${base}/${batch.id}/plans/${second.id}`).expect(200)).body;
    expect(kept.runs).toEqual(second.runs);
    expect(kept.usedAt).not.toBeNull();
  });

  it('keep a layout made by hand to the last digit, and plan the rest round a pin', async () => {
    const batch = await ready('Pinned', { 'Thank you': 2, Hello: 2 });
    const plan = await planned(batch.id);
    const [run] = plan.runs;
    const { placements } = run.plan.setups[0];
    const pin = { ...placements[0], x: placements[0].x + 0.37 };
    const around = await planned(batch.id, { pinned: [{ cardstockId: run.cardstock.id, pinned: [{ setup: 0, placement: pin }] }] });
    expect(around.madeHow).toBe('around-pins');
    expect(around.runs[0].plan.setups[0].placements.find((p: { id: number }) => p.id === pin.id)).toMatchObject({ x: pin.x, y: pin.y, rotationDeg: pin.rotationDeg, stamps: pin.stamps });
    expect(checkLayout(around.runs[0].order, around.runs[0].plan.setups)).toEqual([]);
  });

  it('keep every place of a layout made by hand, and count it through: the same labels, presses and cuts follow', async () => {
    const batch = await ready('By hand', { 'Thank you': 2, Hello: 3 });
    const plan = await planned(batch.id);
    const [run] = plan.runs;
    const pinned = run.plan.setups.flatMap((setup: { placements: object[] }, at: number) => setup.placements.map((placement) => ({ setup: at, placement })));
    pinned[0] = { setup: 0, placement: { ...pinned[0].placement, y: pinned[0].placement.y + 0.125 } };
    const kept = await planned(batch.id, { byHand: true, pinned: [{ cardstockId: run.cardstock.id, pinned }] });
    expect(kept).toMatchObject({ madeHow: 'by-hand', labels: 5 });
    expect(kept.runs[0].unplaced).toEqual([]);
    for (const { setup, placement } of pinned) {
      const stands = kept.runs[0].plan.setups[setup].placements.find((p: { id: number }) => p.id === placement.id);
      expect(stands).toMatchObject({ x: placement.x, y: placement.y, rotationDeg: placement.rotationDeg, stamps: placement.stamps });
    }
  });

  it('say why they are so, and what one more die would save only where the planner found it', async () => {
    const batch = await ready('Explained', { 'Thank you': 2, Hello: 6, 'With love': 6 });
    const plan = await planned(batch.id);
    // Three labels of the smallest die, of which one is owned: each needs a pass of its own, so a second die saves some.
    expect(plan.runs[0].explanations).toContain('“Hello” is wanted 6 times from one stamp: that alone takes 6 presses.');
    expect(plan.runs[0].explanations.some((words: string) => /^One more copy of the die “55 × 22 mm” would save .*\d+ cut passes/.test(words))).toBe(true);
  });

  it('give printing and the bench the names of everything, as they were', async () => {
    const batch = await ready('Named', { 'Thank you': 1 });
    const plan = await planned(batch.id);
    const printed = await planForPrinting(kit.db, kit.studioId, plan.id);
    const [run] = printed!.plan.runs;
    expect(printed!.batch).toMatchObject({ name: 'Named', platformName: 'Table press' });
    expect(Object.values(run.names.inks)).toEqual([{ name: 'Night blue', colour: '#22304A', kind: 'dye', dryingMinutes: 2 }]);
    expect(Object.values(run.names.sentiments)).toEqual([{ name: 'Thank you', words: 'Thank you' }]);
    expect(printed!.cardstocks[run.cardstockId!].name).toBe('Smooth white');
    const setups = await kit.db('setups').where({ plan_id: plan.id }).join('placement_lines', 'placement_lines.setup_id', 'setups.id').select('labels', 'line_id');
    expect(setups).toEqual([{ labels: 1, line_id: run.order.lines[0].id }]);
  });

  it('takes an alternative in the place of the plan', async () => {
    const batch = await ready('Alternatives', { 'Thank you': 4, Hello: 1, 'With love': 3, 'Just a note': 2 });
    const plan = await planned(batch.id);
    const other = plan.alternatives.find((one: { chosen: boolean }) => !one.chosen) ?? plan.alternatives[0];
    const { body } = await maker.post(`${base}/${batch.id}/plans/${plan.id}/choose`, { alternative: other.kind }).expect(200);
    expect(body).toMatchObject({ madeHow: 'alternative', totals: other.totals });
    expect(body.alternatives.find((one: { kind: string }) => one.kind === other.kind)).toMatchObject({ chosen: true });
  });
});

describe('run sheets', () => {
  it('are tried as the cardstock gives them and the platform takes them, best for the aim first', async () => {
    const batch = await ready('Sizes', { 'Thank you': 4, Hello: 4 }, { aim: 'sheets' });
    const { jobId } = (await maker.post(`${base}/${batch.id}/sheet-sizes`).expect(202)).body;
    const { state, result } = await kit.jobEnded(maker, jobId, 40_000);
    expect(state).toBe('done');
    const { items } = result as { items: { widthMm: number; heightMm: number; stockSheets: number; unplaced: number }[] };
    expect(items.length).toBeGreaterThan(3);
    // Corner top left and hinge left, so a sheet may hang over the right and the bottom: 215.9 × 279.4 lies there whole.
    expect(items.some(({ widthMm, heightMm }) => widthMm === 215.9 && heightMm === 279.4)).toBe(true);
    const whole = items.filter(({ unplaced }) => unplaced === 0).map(({ stockSheets }) => stockSheets);
    expect(whole).toEqual([...whole].sort((a, b) => a - b));
  });
});

describe('stopping a planning', () => {
  it('keeps the best so far', async () => {
    const batch = await ready('Stopped', { 'Thank you': 7, Hello: 5, 'With love': 3, 'Just a note': 9, 'Happy birthday': 4, Congratulations: 6 }, { turns: 'auto' });
    const { jobId } = (await maker.post(`${base}/${batch.id}/plans`, { effort: 10 }).expect(202)).body;
    await maker.post(`${base}/${batch.id}/plans/stop`).expect(204);
    const job = await kit.jobEnded(maker, jobId, 40_000);
    const plan = (await maker.get(`${base}/${batch.id}/plans/${(job.result as { planId: string }).planId}`).expect(200)).body;
    expect(plan.stopped).toBe(true);
    expect(plan.labels).toBe(34);
    expect(checkLayout(plan.runs[0].order, plan.runs[0].plan.setups)).toEqual([]);
  });
});
