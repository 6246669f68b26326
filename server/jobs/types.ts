/** Queued work, as the features see it. The queue itself is behind `Jobs`. */
import type { Knex } from 'knex';
import type { z } from 'zod';
import type { RunTotals } from '../engine/gangrun/types.ts';

export type JobState = 'queued' | 'running' | 'done' | 'failed' | 'cancelled';

/** A job as the person sees it; kept in table `jobs`, so that progress comes back after a reload. */
export interface JobStatus {
  id: string;
  studioId: string;
  kind: string;
  /** What it is about: the stamp set, the batch. */
  subjectId: string | null;
  state: JobState;
  /** 0 to 1. */
  progress: number;
  stage: string;
  /** What `save` returned. */
  result: unknown;
  error: { code: string; message: string } | null;
}

export interface JobContext {
  jobId: string;
  studioId: string;
  /** Aborted when the person cancels or the server stops. */
  signal: AbortSignal;
  onProgress(done: number, stage: string): void;
  /** Runs an engine door in a worker thread; progress and cancelling go through by themselves. */
  engine: EnginePool;
}

/**
 * A kind of queued work. `run` computes and may be repeated after a crash; `save` writes its output in the same transaction
 * that marks the job done, so a result is written exactly once.
 */
export interface JobDefinition<P = unknown, O = unknown> {
  kind: string;
  payload: z.ZodType<P>;
  /** A worker that takes longer is replaced and the job tried again, twice at most. */
  timeLimitMs: number;
  run(payload: P, context: JobContext): Promise<O>;
  save(tx: Knex.Transaction, payload: P, output: O, context: { jobId: string; studioId: string }): Promise<unknown>;
  /** After the last failure or a cancel, in one transaction with the job's own row. */
  onFailed?(tx: Knex.Transaction, payload: P, error: { code: string; message: string }, context: { jobId: string; studioId: string }): Promise<void>;
}

export interface Jobs {
  /** Queues in the given transaction: rolled back with it. Same `singletonKey` while one is waiting or running: that one's id. */
  enqueue<P>(tx: Knex, definition: JobDefinition<P, never> | { kind: string }, payload: P, about: { studioId: string; subjectId: string | null; personId: string; singletonKey?: string }): Promise<string>;
  cancel(jobId: string): Promise<void>;
}

export interface PoolOptions {
  /** Ends the work; nothing comes of it. */
  signal?: AbortSignal;
  /** Asks for the best so far: the work ends early, and its result counts. */
  finish?: AbortSignal;
  onProgress?: (done: number, stage: string) => void;
  /** A better plan was found on the way. */
  onBest?: (totals: RunTotals) => void;
  timeLimitMs?: number;
}

/** Names of the functions in jobs/pool-worker.ts. Errors keep their `code` and message across the thread. */
export interface EnginePool {
  run<T = unknown>(task: string, input: unknown, options?: PoolOptions): Promise<T>;
}
