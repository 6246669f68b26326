/** Planning a batch: every cardstock's order in turn, then the same orders with other aims, so that people can compare. */
import { setTimeout as sleep } from 'node:timers/promises';
import { z } from 'zod';
import { ALTERNATIVES, PinnedRun } from '../../contract/plans.ts';
import type { AlternativeKind } from '../../contract/plans.ts';
import type { Pace, RunOrder, RunPlan, RunTotals } from '../../engine/gangrun/types.ts';
import { conflict } from '../../errors/app-error.ts';
import type { Deps } from '../../feature.ts';
import type { JobContext, JobDefinition } from '../../jobs/types.ts';
import { orderParts } from './batch-parts.ts';
import { advanceBatch, findBatch, isStopAsked, lockBatch } from './batches.queries.ts';
import { reasons, whatIfs } from './plan-advice.ts';
import { emptyPlan } from './plan-totals.ts';
import { insertPlan } from './plans.queries.ts';
import type { StoredRun } from './plans.queries.ts';
import { assembleRuns } from './run-order.ts';
import type { AssembledRun } from './run-order.ts';

export const PLAN_BATCH = { kind: 'plan-batch' } as const;
/** Forty labels take some five seconds for each aim on a quiet machine; a busy one is given room. */
const PLAN_LIMIT_MS = 300_000;
/** Soon enough that Stop feels like it. */
const ASK_STOP_MS = 400;
/** In minutes a pass, so that a plan with fewer passes is always the faster one. */
const DEAR_PASS = 1e4;

export const PlanPayload = z.object({
  batchId: z.uuid(), pinned: z.array(PinnedRun), byHand: z.boolean(), effort: z.number(), madeBy: z.string(),
});
export type PlanPayload = z.output<typeof PlanPayload>;
interface PlanOutput { contentVersion: number; runs: StoredRun[] }

export function planBatchJob({ db, events }: Pick<Deps, 'db' | 'events'>): JobDefinition<PlanPayload, PlanOutput> {
  return {
    ...PLAN_BATCH,
    payload: PlanPayload,
    timeLimitMs: PLAN_LIMIT_MS,

    async run(payload, context) {
      const batch = await findBatch(db, context.studioId, payload.batchId);
      if (!batch) throw conflict('batch-gone', 'The batch was deleted in the meantime.');
      const assembled = assembleRuns(await orderParts(db, batch));
      const finish = new AbortController(), over = new AbortController();
      const watching = watchForStop(async () => isStopAsked(db, context.studioId, batch.id, context.jobId), finish, over.signal);
      try {
        const runs: StoredRun[] = [];
        for (const [i, run] of assembled.entries()) runs.push(await planRun(run, payload, { context, finish: finish.signal, from: i / assembled.length, share: 1 / assembled.length }));
        return { contentVersion: batch.content_version, runs };
      } finally {
        over.abort();
        await watching;
      }
    },

    async save(tx, payload, { contentVersion, runs }, { studioId }) {
      // Deleted while it was planned: nobody will look at this plan.
      if (!(await lockBatch(tx, studioId, payload.batchId))) return { planId: null };
      const madeHow = payload.byHand ? 'by-hand' : payload.pinned.some((run) => run.pinned.length > 0) ? 'around-pins' : 'planned';
      const made = await insertPlan(tx, { studioId, batchId: payload.batchId, madeHow, madeBy: payload.madeBy, contentVersion, runs });
      await advanceBatch(tx, studioId, payload.batchId, 'planned');
      await events.publish(tx, studioId, { type: 'changed', noun: 'batches', id: payload.batchId });
      return { planId: made.id, number: made.number };
    },

    async onFailed(tx, payload, _error, { studioId }) {
      await events.publish(tx, studioId, { type: 'changed', noun: 'batches', id: payload.batchId });
    },
  };
}

interface Slice { context: JobContext; finish: AbortSignal; from: number; share: number }

async function planRun(run: AssembledRun, payload: PlanPayload, slice: Slice): Promise<StoredRun> {
  const kept = { cardstockId: run.cardstockId, names: run.names, leftOut: run.leftOut };
  if (run.order.lines.length === 0) return { ...kept, order: run.order, plan: emptyPlan(), explanations: [], alternatives: [] };
  const pinned = payload.pinned.find((other) => other.cardstockId === run.cardstockId)?.pinned ?? [];
  const order: RunOrder = { ...run.order, effort: payload.effort, ...(pinned.length > 0 ? { pinned } : {}) };
  // Half the bar for the plan that was asked for, the rest for its alternatives; a layout kept by hand has none.
  const others = payload.byHand ? [] : ALTERNATIVES.filter((kind) => kind !== order.aim);
  const step = slice.share / (others.length + 2);
  const plan = await search(order, { ...slice, share: step * 2 });
  const alternatives = [];
  for (const [i, kind] of others.entries()) {
    // Stopped: what there is, is enough.
    if (slice.finish.aborted) break;
    const other = await search(withAim(order, kind), { ...slice, from: slice.from + step * (2 + i), share: step });
    alternatives.push({ kind, plan: kind === 'cut-passes' ? repriced(other, paceOf(order), plan.atLeast) : other });
  }
  return { ...kept, order, plan, explanations: [...reasons(order, plan, run.names), ...(await advice(order, plan, run, slice))], alternatives: [{ kind: order.aim, plan }, ...alternatives] };
}

/** What would help; nothing is looked for once the person has stopped. */
async function advice(order: RunOrder, plan: RunPlan, run: AssembledRun, { context, finish }: Slice): Promise<string[]> {
  const found: string[] = [];
  for (const whatIf of whatIfs(order, plan, run.names)) {
    if (finish.aborted) break;
    const words = whatIf.words(await context.engine.run<RunPlan>('planGangRun', { order: whatIf.order }, { finish, onProgress: () => undefined }));
    if (words !== null) found.push(words);
  }
  return found;
}

function withAim(order: RunOrder, kind: AlternativeKind): RunOrder {
  if (kind !== 'cut-passes') return { ...order, aim: kind };
  return { ...order, aim: 'time', pace: { ...paceOf(order), cutPass: DEAR_PASS } };
}

const paceOf = (order: RunOrder): Pace => order.pace ?? { setup: 4, perStamp: 1 / 3, press: 1 / 2, perInked: 8 / 60, cutPass: 3 / 4 };

/** The studio's own pace for a plan that was found with another; what is least possible does not depend on the aim. */
function repriced(plan: RunPlan, pace: Pace, atLeast: RunPlan['atLeast']): RunPlan {
  return { ...plan, atLeast, totals: { ...plan.totals, minutes: plan.totals.minutes - plan.totals.cutPasses * (DEAR_PASS - pace.cutPass) } };
}

function search(order: RunOrder, { context, finish, from, share }: Slice): Promise<RunPlan> {
  let best: RunTotals | null = null, done = 0;
  const tell = (stage: string) => context.onProgress(from + share * done, best === null ? stage : `${stage} Best so far: ${best.sheets} ${best.sheets === 1 ? 'sheet' : 'sheets'}, ${Math.round(best.minutes)} minutes.`);
  return context.engine.run<RunPlan>('planGangRun', { order }, {
    finish,
    onProgress: (share01, stage) => {
      done = share01;
      tell(`${stage}.`);
    },
    onBest: (totals) => {
      best = totals;
      tell('Looking for a better plan.');
    },
  });
}

async function watchForStop(asked: () => Promise<boolean>, finish: AbortController, over: AbortSignal): Promise<void> {
  while (!over.aborted && !finish.signal.aborted) {
    // A database that is away for a moment ends no planning.
    if (await asked().catch(() => false)) finish.abort();
    await sleep(ASK_STOP_MS, undefined, { signal: over }).catch(() => undefined);
  }
}
