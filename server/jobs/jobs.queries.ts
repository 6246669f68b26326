/** SQL of table `jobs`. */
import type { Knex } from 'knex';
import { newId } from '../db/database.ts';
import type { JobState, JobStatus } from './types.ts';

const COLUMNS = ['id', 'studio_id', 'kind', 'subject_id', 'payload', 'state', 'attempt', 'progress', 'stage', 'result', 'error', 'created_at'];

export interface JobRow extends JobStatus {
  payload: unknown;
  attempt: number;
  createdAt: string;
}

function toRow(r: Record<string, never>): JobRow {
  return {
    id: r.id, studioId: r.studio_id, kind: r.kind, subjectId: r.subject_id, payload: r.payload, state: r.state, attempt: r.attempt,
    progress: r.progress, stage: r.stage, result: r.result ?? null, error: r.error, createdAt: (r.created_at as Date).toISOString(),
  };
}

export interface NewJob { kind: string; payload: unknown; studioId: string; subjectId: string | null; personId: string; singletonKey?: string }

/** Answers the id, and whether it is a new one: under a singleton key an open job stands for the later one. */
export async function insertJob(db: Knex, job: NewJob): Promise<{ id: string; isNew: boolean }> {
  // The open one may end between the two statements; then the next round inserts.
  for (let round = 0; round < 5; round += 1) {
    const [row] = await db('jobs')
      .insert({ id: newId(), studio_id: job.studioId, person_id: job.personId, kind: job.kind, subject_id: job.subjectId, singleton_key: job.singletonKey ?? null, payload: JSON.stringify(job.payload) })
      .onConflict(db.raw(`(studio_id, singleton_key) WHERE singleton_key IS NOT NULL AND state IN ('queued', 'running')`))
      .ignore()
      .returning('id');
    if (row) return { id: row.id, isNew: true };
    const open = await db('jobs').where({ studio_id: job.studioId, singleton_key: job.singletonKey! }).whereIn('state', ['queued', 'running']).first('id');
    if (open) return { id: open.id, isNew: false };
  }
  throw new Error(`Job ${job.kind} could not be queued beside its twin.`);
}

export async function findJob(db: Knex, id: string, studioId?: string): Promise<JobRow | null> {
  const row = await db('jobs').where({ id, ...(studioId ? { studio_id: studioId } : {}) }).first(COLUMNS);
  return row ? toRow(row) : null;
}

export async function listJobs(db: Knex, studioId: string, subjectId?: string): Promise<JobRow[]> {
  const rows = await db('jobs')
    .where({ studio_id: studioId, ...(subjectId ? { subject_id: subjectId } : {}) })
    .where((q) => q.whereIn('state', ['queued', 'running']).orWhereRaw(`finished_at > now() - interval '10 minutes'`))
    .orderBy('id', 'desc')
    .limit(200)
    .select(COLUMNS);
  return rows.map(toRow);
}

/** Takes it in hand: counts the attempt. Null where it is no longer waiting. */
export async function startAttempt(db: Knex, id: string): Promise<JobRow | null> {
  const [row] = await db('jobs').where({ id, state: 'queued' }).update({ state: 'running', attempt: db.raw('attempt + 1'), progress: 0, stage: '', updated_at: db.fn.now() }).returning(COLUMNS);
  return row ? toRow(row) : null;
}

export async function saveProgress(db: Knex, job: { id: string; attempt: number }, progress: number, stage: string): Promise<boolean> {
  return (await db('jobs').where({ id: job.id, attempt: job.attempt, state: 'running' }).update({ progress, stage, updated_at: db.fn.now() })) === 1;
}

/**
 * Ends an attempt or sends it back to the queue. Null where it is another's by now: cancelled, or taken over after its
 * lock was lost. The row stays locked to the end of the transaction, so that only one attempt can ever save.
 */
export async function changeState(tx: Knex, job: { id: string; attempt: number }, state: JobState, more: { result?: unknown; error?: { code: string; message: string } } = {}): Promise<JobRow | null> {
  const ended = state === 'done' || state === 'failed' || state === 'cancelled';
  const [row] = await tx('jobs')
    .where({ id: job.id, attempt: job.attempt, state: 'running' })
    .update({
      state,
      updated_at: tx.fn.now(),
      ...(ended ? { finished_at: tx.fn.now() } : {}),
      ...(state === 'done' ? { progress: 1 } : {}),
      ...(more.result !== undefined ? { result: JSON.stringify(more.result) } : {}),
      ...(more.error ? { error: JSON.stringify(more.error) } : {}),
    })
    .returning(COLUMNS);
  return row ? toRow(row) : null;
}

export async function saveResult(tx: Knex, id: string, result: unknown): Promise<void> {
  await tx('jobs').where({ id }).update({ result: result === undefined ? null : JSON.stringify(result) });
}

/** Null where it had ended already. */
export async function cancelJob(tx: Knex, id: string, error: { code: string; message: string }): Promise<JobRow | null> {
  const [row] = await tx('jobs').where({ id }).whereIn('state', ['queued', 'running']).update({ state: 'cancelled', error: JSON.stringify(error), finished_at: tx.fn.now(), updated_at: tx.fn.now() }).returning(COLUMNS);
  return row ? toRow(row) : null;
}

/** Running, though nobody holds the lock: their worker is dead. */
export async function listAbandoned(db: Knex): Promise<{ id: string; attempt: number }[]> {
  const { rows } = await db.raw(
    `SELECT id, attempt FROM jobs WHERE state = 'running' AND NOT EXISTS (
       SELECT 1 FROM pg_locks l, (SELECT hashtextextended(jobs.id::text, 0) AS k) h
       WHERE l.locktype = 'advisory' AND l.granted AND l.objsubid = 1
         AND l.database = (SELECT oid FROM pg_database WHERE datname = current_database())
         AND l.classid = ((h.k >> 32) & 4294967295)::oid AND l.objid = (h.k & 4294967295)::oid)`,
  );
  return rows;
}

/** Waiting, but not in the queue: taken from it by a process that died before it began. */
export async function listForgotten(db: Knex): Promise<string[]> {
  const { rows } = await db.raw(
    `SELECT id FROM jobs WHERE state = 'queued' AND updated_at < now() - interval '8 seconds'
       AND NOT EXISTS (SELECT 1 FROM pgboss.job b WHERE b.name = 'work' AND b.state IN ('created', 'retry') AND b.data ->> 'jobId' = jobs.id::text)`,
  );
  return rows.map((r: { id: string }) => r.id);
}
