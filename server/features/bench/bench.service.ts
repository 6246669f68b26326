/** What is recorded at the table. Records name a press by its run and number, so the same request twice is one press. */
import type { Knex } from 'knex';
import type { Bench, BenchPress, benchRoutes } from '../../contract/bench.ts';
import type { BodyOf } from '../../contract/route.ts';
import type { Press } from '../../engine/gangrun/types.ts';
import { conflict, invalid, notFound } from '../../errors/app-error.ts';
import type { Deps } from '../../feature.ts';
import { advanceBatch, findBatch, lockBatch } from '../batches/batches.queries.ts';
import { markPlanUsed, newestPlan, planById } from '../batches/plans.queries.ts';
import type { StoredPlan } from '../batches/plans.queries.ts';
import { benchOf, deletePress, findPress, insertPress, setCutPass, stampedPlanId, updateImpression } from './bench.queries.ts';
import type { OfRun } from './bench.queries.ts';

type Routes = typeof benchRoutes;
type Key = `${'PUT' | 'POST'} /studios/:studioId/batches/:id/bench/${string}`;
type Body<K extends Key & keyof Routes> = BodyOf<Routes[K]>;
interface At { studioId: string; id: string }

export function createBenchService({ db, events }: Pick<Deps, 'db' | 'events'>) {
  const changed = (tx: Knex, at: At) => events.publish(tx, at.studioId, { type: 'changed', noun: 'bench', id: at.id });

  /** In one transaction with the batch held, so that two people at the table wait for each other. */
  async function atTable<T>(at: At, of: { planId: string; runId: string }, work: (tx: Knex.Transaction, run: OfRun, plan: StoredPlan) => Promise<T>): Promise<T> {
    return db.transaction(async (tx) => {
      if (!(await lockBatch(tx, at.studioId, at.id))) throw notFound('This batch');
      const plan = await planById(tx, at.studioId, of.planId);
      if (!plan || plan.batchId !== at.id || !plan.runs.some((run) => run.id === of.runId)) throw conflict('plan-replaced', 'This plan was replaced by another in the meantime. Load the page again.');
      const done = await work(tx, { studioId: at.studioId, batchId: at.id, planId: of.planId, runId: of.runId }, plan);
      await changed(tx, at);
      return done;
    });
  }

  return {
    async find({ studioId, id }: At): Promise<Bench> {
      if (!(await findBatch(db, studioId, id))) throw notFound('This batch');
      const planId = (await stampedPlanId(db, studioId, id)) ?? (await newestPlan(db, studioId, id))?.id ?? null;
      return planId === null ? { planId, presses: [], cutPasses: [] } : { planId, ...(await benchOf(db, studioId, id, planId)) };
    },

    async record(at: At, body: Body<'PUT /studios/:studioId/batches/:id/bench/presses'>, by: string, key: string | null): Promise<BenchPress> {
      return atTable(at, body, async (tx, run, plan) => {
        const { inked } = pressOf(plan, body.runId, body.number);
        const told = new Map(body.impressions.map((row) => [row.placement, row]));
        for (const placement of told.keys()) if (!inked.some((row) => row.placement === placement)) throw invalid(`Place ${placement} makes no label in this press.`);
        const impressions = inked.map(({ placement, lineId }) => {
          const { outcome, restamps, reason, note } = told.get(placement) ?? { outcome: 'clean' as const, restamps: 0, reason: '', note: '' };
          return { placement, line_id: lineId, outcome, restamps, reason, note };
        });
        if (await insertPress(tx, run, { number: body.number, by, key, impressions })) {
          await markPlanUsed(tx, at.studioId, body.planId);
          await advanceBatch(tx, at.studioId, at.id, 'stamping');
          await events.publish(tx, at.studioId, { type: 'changed', noun: 'batches', id: at.id });
        }
        return pressOnRecord(tx, run, body.number);
      });
    },

    async undo(at: At, body: Body<'POST /studios/:studioId/batches/:id/bench/presses/undo'>): Promise<void> {
      await atTable(at, body, async (tx, run) => {
        if (!(await deletePress(tx, run, body.number))) throw notFound('This press');
      });
    },

    async mark(at: At, body: Body<'PUT /studios/:studioId/batches/:id/bench/impressions'>, by: string): Promise<BenchPress> {
      return atTable(at, body, async (tx, run) => {
        const press = await findPress(tx, run, body.number);
        if (!press) throw notFound('This press');
        const { placement, outcome, restamps, reason, note } = body;
        if (!(await updateImpression(tx, at.studioId, press.id, { placement, line_id: '', outcome, restamps, reason, note }, by))) throw invalid(`Place ${placement} makes no label in this press.`);
        return pressOnRecord(tx, run, body.number);
      });
    },

    async cut(at: At, body: Body<'PUT /studios/:studioId/batches/:id/bench/cut-passes'>, by: string): Promise<void> {
      await atTable(at, body, async (tx, run, plan) => {
        if (body.number > plan.runs.find(({ id }) => id === body.runId)!.plan.cutPasses.length) throw invalid('The plan has no such cut pass.');
        await setCutPass(tx, run, body.number, body.done, by);
      });
    },

    async finish(at: At): Promise<void> {
      await db.transaction(async (tx) => {
        if (!(await lockBatch(tx, at.studioId, at.id))) throw notFound('This batch');
        if ((await stampedPlanId(tx, at.studioId, at.id)) === null) throw conflict('nothing-stamped', 'Nothing of this batch has been stamped yet.');
        await advanceBatch(tx, at.studioId, at.id, 'finished');
        await events.publish(tx, at.studioId, { type: 'changed', noun: 'batches', id: at.id });
      });
    },
  };
}

function pressOf(plan: StoredPlan, runId: string, number: number): Press {
  const press = plan.runs.find((run) => run.id === runId)!.plan.setups.flatMap((setup) => setup.presses)[number - 1];
  if (!press) throw invalid('The plan has no such press.');
  return press;
}

async function pressOnRecord(tx: Knex, run: OfRun, number: number): Promise<BenchPress> {
  const { id: _, ...press } = (await findPress(tx, run, number))!;
  return press;
}
