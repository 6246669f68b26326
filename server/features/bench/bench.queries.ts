/** Rows of `presses`, `impressions` and `cut_passes`. */
import type { Knex } from 'knex';
import type { Bench, BenchPress, Impression, Outcome } from '../../contract/bench.ts';
import { newId } from '../../db/database.ts';

interface PressRow { id: string; run_id: string; plan_id: string; number: number; done_by: string; done_at: Date }
interface ImpressionRow { press_id: string; placement: number; line_id: string; outcome: Outcome; restamps: number; reason: string; note: string; changed_by: string; changed_at: Date }
const PRESS = ['id', 'run_id', 'plan_id', 'number', 'done_by', 'done_at'];
const IMPRESSION = ['press_id', 'placement', 'line_id', 'outcome', 'restamps', 'reason', 'note', 'changed_by', 'changed_at'];

export interface OfRun { studioId: string; batchId: string; planId: string; runId: string }
export type NewImpression = Pick<ImpressionRow, 'placement' | 'line_id' | 'outcome' | 'restamps' | 'reason' | 'note'>;

function toPress(row: PressRow, impressions: readonly ImpressionRow[]): BenchPress {
  return { runId: row.run_id, number: row.number, doneBy: row.done_by, doneAt: row.done_at.toISOString(), impressions: impressions.filter((i) => i.press_id === row.id).map(toImpression) };
}
const toImpression = (row: ImpressionRow): Impression => ({
  placement: row.placement, lineId: row.line_id, outcome: row.outcome, restamps: row.restamps, reason: row.reason, note: row.note, changedBy: row.changed_by, changedAt: row.changed_at.toISOString(),
});

/** Plan that the batch was stamped from, last first. */
export async function stampedPlanId(db: Knex, studioId: string, batchId: string): Promise<string | null> {
  return (await db('presses').where({ studio_id: studioId, batch_id: batchId }).orderBy('done_at', 'desc').first<{ plan_id: string } | undefined>('plan_id'))?.plan_id ?? null;
}

export async function benchOf(db: Knex, studioId: string, batchId: string, planId: string): Promise<Omit<Bench, 'planId'>> {
  const presses = await db('presses').where({ studio_id: studioId, batch_id: batchId, plan_id: planId }).orderBy('number').select<PressRow[]>(PRESS);
  const impressions = await db('impressions').where({ studio_id: studioId }).whereIn('press_id', presses.map((row) => row.id)).orderBy('placement').select<ImpressionRow[]>(IMPRESSION);
  const cuts = await db('cut_passes').where({ studio_id: studioId, batch_id: batchId, plan_id: planId }).orderBy('number').select<PressRow[]>(['run_id', 'number', 'done_by', 'done_at']);
  return { presses: presses.map((row) => toPress(row, impressions)), cutPasses: cuts.map((row) => ({ runId: row.run_id, number: row.number, doneBy: row.done_by, doneAt: row.done_at.toISOString() })) };
}

export async function findPress(db: Knex, { studioId, runId }: OfRun, number: number): Promise<(BenchPress & { id: string }) | null> {
  const row = await db('presses').where({ studio_id: studioId, run_id: runId, number }).first<PressRow | undefined>(PRESS);
  if (!row) return null;
  const impressions = await db('impressions').where({ studio_id: studioId, press_id: row.id }).orderBy('placement').select<ImpressionRow[]>(IMPRESSION);
  return { id: row.id, ...toPress(row, impressions) };
}

/** False where it was recorded already. */
export async function insertPress(tx: Knex, of: OfRun, press: { number: number; by: string; key: string | null; impressions: readonly NewImpression[] }): Promise<boolean> {
  const id = newId();
  const made = await tx('presses')
    .insert({ id, studio_id: of.studioId, batch_id: of.batchId, plan_id: of.planId, run_id: of.runId, number: press.number, done_by: press.by, idempotency_key: press.key })
    .onConflict(['studio_id', 'run_id', 'number']).ignore().returning('id');
  if (made.length === 0) return false;
  if (press.impressions.length > 0) await tx('impressions').insert(press.impressions.map((row) => ({ id: newId(), studio_id: of.studioId, press_id: id, changed_by: press.by, ...row })));
  return true;
}

export async function deletePress(tx: Knex, { studioId, runId }: OfRun, number: number): Promise<boolean> {
  return (await tx('presses').where({ studio_id: studioId, run_id: runId, number }).delete()) === 1;
}

export async function updateImpression(tx: Knex, studioId: string, pressId: string, { placement, line_id: _, ...change }: NewImpression, by: string): Promise<boolean> {
  return (await tx('impressions').where({ studio_id: studioId, press_id: pressId, placement }).update({ ...change, changed_by: by, changed_at: tx.fn.now() })) === 1;
}

export async function setCutPass(tx: Knex, of: OfRun, number: number, done: boolean, by: string): Promise<void> {
  if (!done) await tx('cut_passes').where({ studio_id: of.studioId, run_id: of.runId, number }).delete();
  else await tx('cut_passes').insert({ id: newId(), studio_id: of.studioId, batch_id: of.batchId, plan_id: of.planId, run_id: of.runId, number, done_by: by }).onConflict(['studio_id', 'run_id', 'number']).ignore();
}
