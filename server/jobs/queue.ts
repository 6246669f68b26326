/**
 * The queue as features see it. pg-boss hands out ids; the truth about a job is its row. A job is queued in the transaction of
 * whoever asks for it, so it is neither lost nor done for something that was rolled back.
 */
import type { Knex } from 'knex';
import type pg from 'pg';
import PgBoss from 'pg-boss';
import type { Logger } from 'pino';
import { inTransaction } from '../db/database.ts';
import type { Events } from '../events/types.ts';
import { cancelJob, insertJob } from './jobs.queries.ts';
import type { JobRow } from './jobs.queries.ts';
import type { JobDefinition, Jobs, JobStatus } from './types.ts';

export const QUEUE = 'work';
/** Tells workers at once that there is something to do, or that a job is no longer wanted. */
export const WAKE_CHANNEL = 'inkmuster_jobs';
export type WakeMessage = { wake: true } | { cancel: string };

const CANCELLED = { code: 'cancelled', message: 'This was stopped on request.' };

export interface Queue extends Jobs {
  boss: PgBoss;
  /** Once all features are known: what is to be told when a job of theirs fails. */
  define(definitions: JobDefinition[]): void;
  definition(kind: string): JobDefinition | undefined;
  /** Puts an id into the queue, in the given transaction. */
  dispatch(tx: Knex, jobId: string): Promise<void>;
  stop(): Promise<void>;
}

export async function createQueue(db: Knex, pool: pg.Pool, events: Events, log: Logger): Promise<Queue> {
  const boss = new PgBoss({
    db: { executeSql: (text, values) => pool.query(text, values) },
    // Retries are ours (see runner.ts): a job that pg-boss believes expired may still be running.
    retryLimit: 0,
    expireInHours: 2,
    archiveCompletedAfterSeconds: 3600,
    deleteAfterDays: 2,
    schedule: false,
  });
  boss.on('error', (error) => log.warn({ err: error }, 'queue'));
  await boss.start();
  await boss.createQueue(QUEUE);

  const known = new Map<string, JobDefinition>();
  async function dispatch(tx: Knex, jobId: string): Promise<void> {
    await boss.send(QUEUE, { jobId }, { db: { executeSql: (text, values) => onConnectionOf(tx, text, values) } });
    await wake(tx, { wake: true });
  }
  return {
    boss,
    dispatch,
    define: (definitions) => definitions.forEach((definition) => known.set(definition.kind, definition)),
    definition: (kind) => known.get(kind),
    async enqueue(tx, { kind }, payload, about) {
      const definition = known.get(kind);
      if (!definition) throw new Error(`No kind of job is called ${kind}.`);
      return inTransaction(tx, async (inner) => {
        const { id, isNew } = await insertJob(inner, { kind, payload: definition.payload.parse(payload), ...about });
        if (isNew) {
          await dispatch(inner, id);
          await events.publish(inner, about.studioId, { type: 'job', job: { id, studioId: about.studioId, kind, subjectId: about.subjectId, state: 'queued', progress: 0, stage: '', error: null } });
        }
        return id;
      });
    },
    async cancel(jobId) {
      await db.transaction(async (tx) => {
        const job = await cancelJob(tx, jobId, CANCELLED);
        if (!job) return;
        await known.get(job.kind)?.onFailed?.(tx, job.payload, CANCELLED, { jobId, studioId: job.studioId });
        await events.publish(tx, job.studioId, { type: 'job', job: statusOf(job) });
        await wake(tx, { cancel: jobId });
      });
    },
    async stop() {
      await boss.stop({ graceful: false, wait: true, close: false });
    },
  };
}

async function wake(tx: Knex, message: WakeMessage): Promise<void> {
  await tx.raw('SELECT pg_notify(?, ?)', [WAKE_CHANNEL, JSON.stringify(message)]);
}

/** pg-boss writes its own SQL with `$1`; this runs it on the transaction's connection, past Knex's own placeholders. */
async function onConnectionOf(tx: Knex, text: string, values: unknown[]): Promise<{ rows: unknown[] }> {
  const client = tx.client as { acquireConnection(): Promise<pg.Client>; releaseConnection(connection: pg.Client): Promise<void> };
  const connection = await client.acquireConnection();
  try {
    return await connection.query(text, values);
  } finally {
    await client.releaseConnection(connection);
  }
}

/** Without the result, which may be long: pages ask for it. */
export function statusOf(job: JobRow): Omit<JobStatus, 'result'> {
  const { id, studioId, kind, subjectId, state, progress, stage, error } = job;
  return { id, studioId, kind, subjectId, state, progress, stage, error };
}
