/** From a plan to its printed pages and its record at the table. */
import { execFileSync } from 'node:child_process';
import { mkdtempSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { beginBatch, layTable } from './batch-table.ts';
import { openKit } from './kit.ts';
import type { Agent, Kit } from './kit.ts';

const base = '/studios/:studioId/batches';
let kit: Kit, maker: Agent, helper: Agent, stranger: Agent;
let batchId = '', planId = '', runId = '';
let placements: number[] = [];

beforeAll(async () => {
  kit = await openKit({ jobs: true });
  [maker, helper] = [await kit.signIn('maker'), await kit.signIn('helper')];
  stranger = await kit.signIn('owner', await kit.makeStudio(await kit.makePerson()));
  const table = await layTable(maker);
  batchId = (await beginBatch(maker, 'Club evening')).id;
  await maker.post(`${base}/${batchId}/lines`, { lines: ['Thank you', 'Hello'].map((title) => ({ sentimentIds: [table.sentiments[title]], quantity: 2 })) }).expect(201);
  await maker.post(`${base}/${batchId}/for-all`, { inkId: table.inks.blue, cardstockId: table.cardstocks.white }).expect(200);
  await maker.post(`${base}/${batchId}/recommended-dies`, { onlyMissing: false }).expect(200);
  await maker.patch(`${base}/${batchId}`, { version: 1, sheetWidthMm: 139.7, sheetHeightMm: 165.1, turns: 'none' }).expect(200);
  const { jobId } = (await maker.post(`${base}/${batchId}/plans`, {}).expect(202)).body;
  planId = ((await kit.jobEnded(maker, jobId, 40_000)).result as { planId: string }).planId;
  const [run] = (await maker.get(`${base}/${batchId}/plans/${planId}`).expect(200)).body.runs;
  runId = run.id;
  placements = run.plan.setups[0].presses[0].inked.map((one: { placement: number }) => one.placement);
}, 90_000);
afterAll(() => kit.close());

const plan = () => `${base}/${batchId}/plans/${planId}`;
const bench = (path = '') => `${base}/${batchId}/bench${path}`;
const press = (number: number, more: object = {}) => ({ planId, runId, number, ...more });

describe('templates', () => {
  it('are one PDF of A4 for a helper without a printer, and the same pages as a preview', async () => {
    const { body, headers } = await helper.get(`${plan()}/templates.pdf?pages=placing,lid,ticket`).buffer(true).parse((res, done) => {
      const parts: Buffer[] = [];
      res.on('data', (part: Buffer) => parts.push(part));
      res.on('end', () => done(null, Buffer.concat(parts)));
    }).expect(200);
    expect(headers['content-type']).toMatch(/application\/pdf/);
    const file = join(mkdtempSync(join(tmpdir(), 'templates-')), 'run.pdf');
    writeFileSync(file, body);
    const info = execFileSync('pdfinfo', [file]).toString();
    const { pages } = (await helper.get(`${plan()}/template-pages?pages=placing,lid,ticket`).expect(200)).body;
    expect(info).toMatch(new RegExp(`Pages:\\s+${pages.length}\\b`));
    // ISO 216 A4 in points of 1/72 in (ISO 32000-1, 8.3.2.3).
    const [, w, h] = /Page size:\s+([\d.]+) x ([\d.]+)/.exec(info)!;
    expect(Number(w)).toBeCloseTo((210 * 72) / 25.4, 0);
    expect(Number(h)).toBeCloseTo((297 * 72) / 25.4, 0);
  });

  it('give the cut lines of a sheet at true size, and nothing to another studio', async () => {
    const { body } = await helper.get(`${plan()}/cut-lines.svg?sheet=1`).expect(200);
    expect(String(body)).toMatch(/<svg[^>]*width="139\.7mm"/);
    await helper.get(`${plan()}/cut-lines.svg?sheet=999`).expect(404);
    await stranger.get(`${plan()}/template-pages`).expect(409);
  });

  it('once printed, the plan stays and the batch goes on', async () => {
    await helper.post(`${plan()}/printed`).expect(204);
    const batch = (await maker.get(`${base}/${batchId}`).expect(200)).body;
    expect(batch.state).toBe('printed');
    expect(batch.plan.usedAt).not.toBeNull();
  });
});

describe('the bench', () => {
  it('records a press once, however often it is told, with who and when', async () => {
    const record = press(1, { impressions: [{ placement: placements[0], outcome: 'missed' }] });
    const { body: first } = await helper.put(bench('/presses'), record).expect(200);
    expect(first.impressions.map((one: { outcome: string }) => one.outcome).sort()).toEqual(['clean', 'missed']);
    const { body: again } = await helper.put(bench('/presses'), press(1)).expect(200);
    expect(again).toEqual(first);
    const { body } = await maker.get(bench()).expect(200);
    expect(body.presses).toHaveLength(1);
    expect(body.presses[0].doneBy).not.toBe('');
    expect((await maker.get(`${base}/${batchId}`)).body.state).toBe('stamping');
  });

  it('keeps what became of a label: stamped again, clean, with the reason', async () => {
    const change = press(1, { placement: placements[0], outcome: 'clean', restamps: 2, reason: 'Too little ink', note: 'left edge' });
    const { body } = await maker.put(bench('/impressions'), change).expect(200);
    expect(body.impressions.find((one: { placement: number }) => one.placement === placements[0])).toMatchObject({ outcome: 'clean', restamps: 2, reason: 'Too little ink', note: 'left edge' });
    await maker.put(bench('/impressions'), { ...change, placement: 999 }).expect(400);
    await maker.put(bench('/impressions'), { ...change, restamps: 100 }).expect(400);
  });

  it('refuses presses that the plan does not have, and another studio', async () => {
    await helper.put(bench('/presses'), press(999)).expect(400);
    await helper.put(bench('/presses'), press(2, { impressions: [{ placement: 4711, outcome: 'clean' }] })).expect(400);
    await stranger.put(bench('/presses'), press(2)).expect(404);
    await stranger.get(bench()).expect(404);
  });

  it('takes a press back, ticks cut passes on and off, and finishes', async () => {
    await helper.put(bench('/presses'), press(2)).expect(200);
    await helper.post(bench('/presses/undo'), press(2)).expect(204);
    expect((await helper.get(bench())).body.presses).toHaveLength(1);
    await helper.put(bench('/cut-passes'), press(1, { done: true })).expect(204);
    await helper.put(bench('/cut-passes'), press(1, { done: true })).expect(204);
    expect((await helper.get(bench())).body.cutPasses).toHaveLength(1);
    await helper.put(bench('/cut-passes'), press(1, { done: false })).expect(204);
    expect((await helper.get(bench())).body.cutPasses).toHaveLength(0);
    await helper.put(bench('/presses'), press(2)).expect(200);
    await helper.post(bench('/finish')).expect(204);
    expect((await maker.get(`${base}/${batchId}`)).body.state).toBe('finished');
  });
});
