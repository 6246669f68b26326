/**
 * Rows of `plans`, `plan_runs`, `setups`, `placements`. Printing and the bench read plans through `planForPrinting` and mark
 * them by `markPlanUsed`, which is what keeps a plan for good.
 */
import type { Knex } from 'knex';
import type { AlternativeKind, MadeHow, PlanNames, PlanSetup, PlanSummary } from '../../contract/plans.ts';
import { newId } from '../../db/database.ts';
import type { RunOrder, RunPlan, Setup } from '../../engine/gangrun/types.ts';
import { labelsMade, sumFigures, sumTotals } from './plan-totals.ts';
import type { LeftOut } from './run-order.ts';

interface PlanRow {
  id: string; studio_id: string; batch_id: string; number: number; used_at: Date | null; made_how: MadeHow; made_by: string; content_version: number;
  totals: PlanSummary['totals']; at_least: PlanSummary['atLeast']; labels: number; stopped: boolean; created_at: Date;
}
const COLUMNS = ['id', 'studio_id', 'batch_id', 'number', 'used_at', 'made_how', 'made_by', 'content_version', 'totals', 'at_least', 'labels', 'stopped', 'created_at'];

export interface StoredAlternative { kind: AlternativeKind; plan: RunPlan }
/** A run as it is kept; `order` and `plan` exactly as the planner takes and gives them. */
export interface StoredRun {
  cardstockId: string | null; order: RunOrder; plan: RunPlan; names: PlanNames; leftOut: LeftOut[]; explanations: string[]; alternatives: StoredAlternative[];
}
export interface StoredPlan extends PlanSummary { batchId: string; contentVersion: number; runs: (StoredRun & { id: string })[]; setups: PlanSetup[] }

function toSummary(row: PlanRow): PlanSummary {
  return {
    id: row.id, number: row.number, madeHow: row.made_how, madeBy: row.made_by, createdAt: row.created_at.toISOString(), usedAt: row.used_at?.toISOString() ?? null,
    totals: row.totals, atLeast: row.at_least, labels: row.labels, stopped: row.stopped,
  };
}

export async function listPlans(db: Knex, studioId: string, batchId: string): Promise<PlanSummary[]> {
  return (await db('plans').where({ studio_id: studioId, batch_id: batchId }).orderBy('number', 'desc').select<PlanRow[]>(COLUMNS)).map(toSummary);
}

export async function newestPlan(db: Knex, studioId: string, batchId: string): Promise<{ id: string; number: number; usedAt: string | null; contentVersion: number; sheets: number } | null> {
  const row = await db('plans').where({ studio_id: studioId, batch_id: batchId }).orderBy('number', 'desc').first<PlanRow | undefined>(COLUMNS);
  return row ? { id: row.id, number: row.number, usedAt: row.used_at?.toISOString() ?? null, contentVersion: row.content_version, sheets: row.totals.sheets } : null;
}

/** With its runs: order, plan, names. Null where it is not in this studio. */
export async function planById(db: Knex, studioId: string, planId: string): Promise<StoredPlan | null> {
  const row = await db('plans').where({ studio_id: studioId, id: planId }).first<PlanRow | undefined>(COLUMNS);
  if (!row) return null;
  const runs = await db('plan_runs').where({ studio_id: studioId, plan_id: planId }).orderBy('position');
  const setups = await db('setups').where({ studio_id: studioId, plan_id: planId }).orderBy('number').select('id', 'run_id', 'number', 'position');
  return {
    ...toSummary(row), batchId: row.batch_id, contentVersion: row.content_version,
    runs: runs.map((run) => ({ id: run.id, cardstockId: run.cardstock_id, order: run.order, plan: run.plan, names: run.names, leftOut: run.left_out, explanations: run.explanations, alternatives: run.alternatives })),
    setups: setups.map((setup) => ({ id: setup.id, runId: setup.run_id, number: setup.number, position: setup.position })),
  };
}

export async function planIdByNumber(db: Knex, studioId: string, batchId: string, number: number): Promise<string | null> {
  return (await db('plans').where({ studio_id: studioId, batch_id: batchId, number }).first<{ id: string } | undefined>('id'))?.id ?? null;
}

/** The orders of a plan, one a cardstock, with what everything in them is called. */
export async function orderOfPlan(db: Knex, studioId: string, planId: string): Promise<{ runId: string; order: RunOrder; names: PlanNames }[]> {
  return ((await planById(db, studioId, planId))?.runs ?? []).map(({ id, order, names }) => ({ runId: id, order, names }));
}

export interface PlanForPrinting {
  plan: StoredPlan;
  batch: { id: string; name: string; platformName: string | null; printerId: string | null };
  cardstocks: Record<string, { name: string; colour: string }>;
}

/** All that a template, a ticket or the bench needs of a plan. */
export async function planForPrinting(db: Knex, studioId: string, planId: string): Promise<PlanForPrinting | null> {
  const plan = await planById(db, studioId, planId);
  if (!plan) return null;
  const batch = await db('batches')
    .leftJoin('platforms', (join) => join.on('platforms.studio_id', 'batches.studio_id').on('platforms.id', 'batches.platform_id'))
    .where({ 'batches.studio_id': studioId, 'batches.id': plan.batchId })
    .first<{ id: string; name: string; printer_id: string | null; platform_name: string | null }>('batches.id', 'batches.name', 'batches.printer_id', 'platforms.name as platform_name');
  const ids = plan.runs.map((run) => run.cardstockId).filter((id) => id !== null);
  const stocks = await db('cardstocks').where({ studio_id: studioId }).whereIn('id', ids).select<{ id: string; name: string; colour: string }[]>('id', 'name', 'colour');
  return {
    plan, batch: { id: batch.id, name: batch.name, platformName: batch.platform_name, printerId: batch.printer_id },
    cardstocks: Object.fromEntries(stocks.map(({ id, name, colour }) => [id, { name, colour }])),
  };
}

/** Printed or stamped from: from now on it stays as it is. False where it was replaced by another in the meantime. */
export async function markPlanUsed(tx: Knex, studioId: string, planId: string): Promise<boolean> {
  return (await tx('plans').where({ studio_id: studioId, id: planId }).update({ used_at: tx.raw('coalesce(used_at, now())') })) === 1;
}

export interface NewPlan { studioId: string; batchId: string; madeHow: MadeHow; madeBy: string; contentVersion: number; runs: StoredRun[] }

/** Takes the place of the newest plan where that was never used, else the next number. The batch is held by the caller. */
export async function insertPlan(tx: Knex, { studioId, batchId, madeHow, madeBy, contentVersion, runs }: NewPlan): Promise<{ id: string; number: number }> {
  const newest = await tx('plans').where({ studio_id: studioId, batch_id: batchId }).orderBy('number', 'desc').forUpdate().first<Pick<PlanRow, 'id' | 'number' | 'used_at'> | undefined>(['id', 'number', 'used_at']);
  if (newest && newest.used_at === null) await tx('plans').where({ studio_id: studioId, id: newest.id }).delete();
  const number = newest ? newest.number + (newest.used_at === null ? 0 : 1) : 1;
  const id = newId();
  await tx('plans').insert({
    id, studio_id: studioId, batch_id: batchId, number, made_how: madeHow, made_by: madeBy, content_version: contentVersion,
    totals: JSON.stringify(sumTotals(runs.map((run) => run.plan.totals))), at_least: JSON.stringify(sumFigures(runs.map((run) => run.plan.atLeast))),
    labels: runs.reduce((sum, run) => sum + labelsMade(run.plan), 0), stopped: runs.some((run) => run.plan.stopped),
  });
  let setupNumber = 1;
  for (const [position, run] of runs.entries()) {
    const runId = newId();
    await tx('plan_runs').insert({
      id: runId, studio_id: studioId, plan_id: id, position, cardstock_id: run.cardstockId, order: JSON.stringify(run.order), plan: JSON.stringify(run.plan), names: JSON.stringify(run.names),
      left_out: JSON.stringify(run.leftOut), explanations: JSON.stringify(run.explanations), alternatives: JSON.stringify(run.alternatives),
    });
    for (const [at, setup] of run.plan.setups.entries()) await insertSetup(tx, { studioId, planId: id, runId, number: setupNumber++, position: at }, setup);
  }
  return { id, number };
}

async function insertSetup(tx: Knex, { studioId, planId, runId, number, position }: { studioId: string; planId: string; runId: string; number: number; position: number }, setup: Setup): Promise<void> {
  const id = newId();
  await tx('setups').insert({
    id, studio_id: studioId, plan_id: planId, run_id: runId, number, position, turns: setup.turns, presses: setup.presses.length, sheets: new Set(setup.presses.map((press) => press.sheet)).size,
  });
  if (setup.placements.length === 0) return;
  await tx('placements').insert(setup.placements.map((p) => ({ studio_id: studioId, setup_id: id, number: p.id, x_mm: p.x, y_mm: p.y, rotation_deg: p.rotationDeg })));
  const made = new Map<string, { number: number; lineId: string; labels: number }>();
  for (const { placement, lineId } of setup.presses.flatMap((press) => press.inked)) {
    const key = `${placement} ${lineId}`;
    const so = made.get(key) ?? { number: placement, lineId, labels: 0 };
    made.set(key, { ...so, labels: so.labels + 1 });
  }
  if (made.size > 0) await tx('placement_lines').insert([...made.values()].map((one) => ({ studio_id: studioId, setup_id: id, number: one.number, line_id: one.lineId, labels: one.labels })));
}
