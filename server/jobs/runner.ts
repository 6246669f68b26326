/**
 * Does queued work. A worker holds a session-level advisory lock on a job while it works, which the database drops when the
 * process dies; every 5 s a sweep puts jobs without a lock back into the queue. Whoever finishes writes the output in the
 * transaction that ends the very attempt it began, so a result is written once even where two have computed it.
 */
import { setTimeout as sleep } from 'node:timers/promises';
import type { Knex } from 'knex';
import type { Logger } from 'pino';
import type { DbSession } from '../db/session.ts';
import { AppError } from '../errors/app-error.ts';
import type { Events } from '../events/types.ts';
import { changeState, listAbandoned, listForgotten, saveProgress, saveResult, startAttempt } from './jobs.queries.ts';
import type { JobRow } from './jobs.queries.ts';
import { QUEUE, statusOf, WAKE_CHANNEL } from './queue.ts';
import type { Queue, WakeMessage } from './queue.ts';
import type { EnginePool, JobDefinition } from './types.ts';

const SWEEP_MS = 5_000;
/** The first try and two more. */
const MAX_ATTEMPTS = 3;
/** More often than this nobody sees a bar move. */
const PROGRESS_MS = 300;
const GIVEN_UP = { code: 'given-up', message: 'This did not work, three times in a row. What you entered is kept; try again, or with a smaller picture or batch.' };

interface Setting { db: Knex; session: DbSession; queue: Queue; events: Events; engine: EnginePool; log: Logger; threads: number; delayMs: number }

export async function startRunner(setting: Setting): Promise<{ stop(): Promise<void> }> {
  const { session, queue, log, threads } = setting;
  const inHand = new Map<string, AbortController>();
  let stopping = false;

  const workers: string[] = [];
  for (let i = 0; i < threads; i += 1) {
    workers.push(await queue.boss.work<{ jobId: string }>(QUEUE, { batchSize: 1, pollingIntervalSeconds: 2 }, async ([{ data }]) => {
      if (!stopping) await take(setting, inHand, data.jobId);
    }));
  }
  await session.listen(WAKE_CHANNEL, (payload) => {
    const message = JSON.parse(payload) as WakeMessage;
    if ('cancel' in message) inHand.get(message.cancel)?.abort('cancelled');
    else workers.forEach((id) => queue.boss.notifyWorker(id));
  });
  // Without the locks others may begin the same jobs: leave them to those.
  session.onLost(() => inHand.forEach((controller) => controller.abort('lock lost')));

  const sweep = setInterval(() => {
    if (!stopping) sweepOnce(setting).catch((error: unknown) => log.warn({ err: error }, 'sweep'));
  }, SWEEP_MS);
  return {
    async stop() {
      stopping = true;
      clearInterval(sweep);
      inHand.forEach((controller) => controller.abort('stopping'));
      // Each puts its job back; a few seconds are enough for that.
      for (let waited = 0; inHand.size > 0 && waited < 4000; waited += 50) await sleep(50);
    },
  };
}

async function take(setting: Setting, inHand: Map<string, AbortController>, jobId: string): Promise<void> {
  const { db, session, queue, events } = setting;
  if (!(await session.tryLock(jobId))) return;
  const controller = new AbortController();
  inHand.set(jobId, controller);
  try {
    const job = await startAttempt(db, jobId);
    if (!job) return;
    const definition = queue.definition(job.kind);
    if (!definition) throw new Error(`No kind of job is called ${job.kind}.`);
    await events.publish(db, job.studioId, { type: 'job', job: statusOf(job) });
    await attempt(setting, definition, job, controller.signal);
  } finally {
    inHand.delete(jobId);
    await session.unlock(jobId).catch(() => undefined);
  }
}

async function attempt(setting: Setting, definition: JobDefinition, job: JobRow, signal: AbortSignal): Promise<void> {
  const { db, events, log } = setting;
  const about = { jobId: job.id, studioId: job.studioId };
  try {
    const payload = definition.payload.parse(job.payload);
    const output = await compute(setting, definition, job, payload, signal);
    signal.throwIfAborted();
    await db.transaction(async (tx) => {
      const ended = await changeState(tx, job, 'done');
      if (!ended) return;
      await saveResult(tx, job.id, await definition.save(tx, payload, output, about));
      await events.publish(tx, job.studioId, { type: 'job', job: statusOf(ended) });
    });
  } catch (error) {
    if (signal.reason === 'cancelled' || signal.reason === 'lock lost') return;
    if (signal.reason === 'stopping') return backToQueue(setting, job, false);
    const refusal = error instanceof AppError && error.status < 500 ? { code: error.code, message: error.message } : null;
    if (!refusal) log.error({ err: error, jobId: job.id, kind: job.kind, attempt: job.attempt }, 'job failed');
    if (!refusal && job.attempt < MAX_ATTEMPTS) return backToQueue(setting, job, true);
    await fail(setting, job, refusal ?? GIVEN_UP);
  }
}

async function compute(setting: Setting, definition: JobDefinition, job: JobRow, payload: unknown, signal: AbortSignal): Promise<unknown> {
  const { db, events, engine, delayMs } = setting;
  const started = Date.now();
  let told = 0;
  const onProgress = (done: number, stage: string) => {
    const now = Date.now();
    if (now - told < PROGRESS_MS || signal.aborted) return;
    told = now;
    const progress = Math.min(1, Math.max(0, done));
    // In one transaction, so that no news of progress comes after that of the end. It is a courtesy: where it cannot be told, the work goes on.
    db.transaction(async (tx) => {
      if (await saveProgress(tx, job, progress, stage)) await events.publish(tx, job.studioId, { type: 'job', job: { ...statusOf(job), progress, stage } });
    }).catch(() => undefined);
  };
  const remainingMs = () => Math.max(1, definition.timeLimitMs - (Date.now() - started));
  const pool: EnginePool = {
    run: (task, input, options = {}) => engine.run(task, input, { signal, onProgress, timeLimitMs: remainingMs(), ...options }),
  };
  if (delayMs > 0) await sleep(delayMs, undefined, { signal });
  const limit = new AbortController();
  const timer = sleep(definition.timeLimitMs + delayMs, undefined, { signal: limit.signal }).then(() => {
    throw new Error(`took longer than ${definition.timeLimitMs} ms`);
  });
  try {
    return await Promise.race([definition.run(payload, { jobId: job.id, studioId: job.studioId, signal, onProgress, engine: pool }), timer]);
  } finally {
    timer.catch(() => undefined);
    limit.abort();
  }
}

/** `countsAsTry` false: the server stops; that was not the job's fault. */
async function backToQueue({ db, queue, events }: Setting, job: JobRow, countsAsTry: boolean): Promise<void> {
  await db.transaction(async (tx) => {
    const row = await changeState(tx, job, 'queued');
    if (!row) return;
    if (!countsAsTry) await tx('jobs').where({ id: job.id }).update({ attempt: job.attempt - 1 });
    await queue.dispatch(tx, job.id);
    await events.publish(tx, job.studioId, { type: 'job', job: statusOf(row) });
  });
}

async function fail({ db, queue, events }: Setting, job: { id: string; attempt: number }, error: { code: string; message: string }): Promise<void> {
  await db.transaction(async (tx) => {
    const row = await changeState(tx, job, 'failed', { error });
    if (!row) return;
    await queue.definition(row.kind)?.onFailed?.(tx, row.payload, error, { jobId: row.id, studioId: row.studioId });
    await events.publish(tx, row.studioId, { type: 'job', job: statusOf(row) });
  });
}

async function sweepOnce(setting: Setting): Promise<void> {
  const { db, queue, log } = setting;
  for (const job of await listAbandoned(db)) {
    log.warn({ jobId: job.id, attempt: job.attempt }, 'worker lost; job goes back to the queue');
    if (job.attempt >= MAX_ATTEMPTS) await fail(setting, job, GIVEN_UP);
    else await db.transaction(async (tx) => {
      if (await changeState(tx, job, 'queued')) await queue.dispatch(tx, job.id);
    });
  }
  for (const id of await listForgotten(db)) await queue.dispatch(db, id);
}
