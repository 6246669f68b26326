/** Plans of a batch: asked for, looked at, compared, chosen. The planning itself is queued work: plans.jobs.ts. */
import type { Knex } from 'knex';
import type { AlternativeKind, Plan, planRoutes, PlanRun, PlanSummary, Unplaced } from '../../contract/plans.ts';
import type { BodyOf } from '../../contract/route.ts';
import type { RunTotals } from '../../engine/gangrun/types.ts';
import { conflict, notFound } from '../../errors/app-error.ts';
import type { Deps } from '../../feature.ts';
import { gearByIds } from '../gear/gear.queries.ts';
import { cardstocks } from '../gear/gear-kinds.ts';
import { askToStopPlanning, findBatch, lockBatch, setPlanJob } from './batches.queries.ts';
import { requiredBatch } from './batches.service.ts';
import type { Actor } from './batches.service.ts';
import { linesOfBatch } from './lines.queries.ts';
import { planChanges } from './plan-changes.ts';
import { sumTotals } from './plan-totals.ts';
import { PLAN_BATCH } from './plans.jobs.ts';
import { COMPARE_SHEETS } from './sheet-sizes.jobs.ts';
import { insertPlan, listPlans, planById, planIdByNumber } from './plans.queries.ts';
import type { StoredPlan, StoredRun } from './plans.queries.ts';

type PlanRequest = BodyOf<(typeof planRoutes)['POST /studios/:studioId/batches/:id/plans']>;

export function createPlanService({ db, jobs, events }: Deps) {
  async function required(tx: Knex, studioId: string, batchId: string, planId: string): Promise<StoredPlan> {
    const plan = await planById(tx, studioId, planId);
    if (!plan || plan.batchId !== batchId) throw notFound('This plan');
    return plan;
  }

  async function shown(tx: Knex, studioId: string, plan: StoredPlan): Promise<Plan> {
    const { runs, contentVersion, ...rest } = plan;
    const batch = await findBatch(tx, studioId, plan.batchId);
    const stocks = await gearByIds(tx, cardstocks, studioId, runs.map((run) => run.cardstockId).filter((id) => id !== null));
    const before = plan.number > 1 ? await planIdByNumber(tx, studioId, plan.batchId, plan.number - 1) : null;
    return {
      ...rest, outdated: batch?.content_version !== contentVersion,
      runs: runs.map((run): PlanRun => {
        const stock = stocks.find(({ id }) => id === run.cardstockId);
        return {
          id: run.id, cardstock: stock ? { id: stock.id, name: stock.name, colour: stock.colour } : null, order: run.order, plan: run.plan, names: run.names, explanations: run.explanations, unplaced: unplacedOf(run),
        };
      }),
      alternatives: alternativesOf(runs), changes: before ? planChanges((await planById(tx, studioId, before))!, plan) : [],
    };
  }

  return {
    async list(studioId: string, batchId: string): Promise<{ items: PlanSummary[] }> {
      await requiredBatch(db, studioId, batchId);
      return { items: await listPlans(db, studioId, batchId) };
    },

    async find(studioId: string, batchId: string, planId: string): Promise<Plan> {
      return shown(db, studioId, await required(db, studioId, batchId, planId));
    },

    /** One planning at a time for a batch; asked for again, it is the one under way. */
    request: (studioId: string, batchId: string, body: PlanRequest, by: Actor): Promise<{ jobId: string }> =>
      db.transaction(async (tx) => {
        const batch = await lockBatch(tx, studioId, batchId);
        if (!batch) throw notFound('This batch');
        if (batch.platform_id === null) throw conflict('no-platform', 'Choose a stamping platform first.');
        if ((await linesOfBatch(tx, studioId, batchId)).length === 0) throw conflict('nothing-chosen', 'Choose at least one stamp first.');
        const payload = { batchId, pinned: body.pinned, byHand: body.byHand, effort: body.effort, madeBy: by.name };
        const jobId = await jobs.enqueue(tx, PLAN_BATCH, payload, { studioId, subjectId: batchId, personId: by.id, singletonKey: `plan:${batchId}` });
        if (jobId !== batch.plan_job_id) await setPlanJob(tx, studioId, batchId, jobId);
        await events.publish(tx, studioId, { type: 'changed', noun: 'batches', id: batchId });
        return { jobId };
      }),

    compareSheets: (studioId: string, batchId: string, by: Actor): Promise<{ jobId: string }> =>
      db.transaction(async (tx) => {
        const batch = await requiredBatch(tx, studioId, batchId);
        if (batch.platform_id === null) throw conflict('no-platform', 'Choose a stamping platform first.');
        return { jobId: await jobs.enqueue(tx, COMPARE_SHEETS, { batchId }, { studioId, subjectId: batchId, personId: by.id, singletonKey: `sheets:${batchId}` }) };
      }),

    async stop(studioId: string, batchId: string): Promise<void> {
      await requiredBatch(db, studioId, batchId);
      await askToStopPlanning(db, studioId, batchId);
    },

    choose: (studioId: string, batchId: string, planId: string, kind: AlternativeKind, by: Actor): Promise<Plan> =>
      db.transaction(async (tx) => {
        if (!(await lockBatch(tx, studioId, batchId))) throw notFound('This batch');
        const plan = await required(tx, studioId, batchId, planId);
        if (!plan.runs.some((run) => run.alternatives.some((other) => other.kind === kind))) throw notFound('This alternative');
        const runs = plan.runs.map(({ id: _id, ...run }): StoredRun => {
          const other = run.alternatives.find((alternative) => alternative.kind === kind);
          return other ? { ...run, plan: other.plan } : run;
        });
        const made = await insertPlan(tx, { studioId, batchId, madeHow: 'alternative', madeBy: by.name, contentVersion: plan.contentVersion, runs });
        await events.publish(tx, studioId, { type: 'changed', noun: 'batches', id: batchId });
        return shown(tx, studioId, await required(tx, studioId, batchId, made.id));
      }),
  };
}

function unplacedOf(run: StoredRun): Unplaced[] {
  return [...run.leftOut, ...run.plan.unplaced.map((one) => ({ ...one, title: run.names.lines[one.lineId]?.title ?? 'A label' }))];
}

/** Summed over the cardstocks; one that says the same as another is left out. */
function alternativesOf(runs: readonly StoredRun[]): Plan['alternatives'] {
  const now = tellable(sumTotals(runs.map((run) => run.plan.totals)));
  const kinds = [...new Set(runs.flatMap((run) => run.alternatives.map(({ kind }) => kind)))];
  const all = kinds.map((kind) => ({ kind, totals: sumTotals(runs.map((run) => (run.alternatives.find((other) => other.kind === kind)?.plan ?? run.plan).totals)) }));
  const distinct = all.filter(({ totals }, i) => all.findIndex((other) => tellable(other.totals) === tellable(totals)) === i);
  return distinct.map((one) => ({ ...one, chosen: tellable(one.totals) === now }));
}

/** Two plans that differ in less than this are the same to whoever chooses. */
function tellable({ setups, presses, sheets, cutPasses, minutes }: RunTotals): string {
  return [setups, presses, sheets, cutPasses, Math.round(minutes)].join();
}
