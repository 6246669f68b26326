/**
 * The one entry of every worker thread: runs a task by its name. Modules are loaded when first needed, so that a thread which
 * only hashes passwords never holds OpenCV.
 */
import { getHeapStatistics } from 'node:v8';
import type { Control } from '../engine/control.ts';
import type { ExpectedFailure, PoolMessage, PoolResult, PoolTask } from './engine-pool.ts';
import { tasks } from './tasks.ts';

/** Memory of the thread beyond which it is not used again: image and OpenCV heaps never shrink. */
const GROWN_BYTES = 900 * 1024 * 1024;

export default async function runTask({ task, input, stop, port }: PoolTask): Promise<PoolResult> {
  const send = (message: PoolMessage) => port.postMessage(message);
  const control: Control = { stop, onProgress: (done, stage) => send({ kind: 'progress', done, stage }), onBest: (totals) => send({ kind: 'best', totals }) };
  let message: PoolMessage & { kind: 'last' };
  let trusted = true;
  try {
    const run = tasks[task];
    if (!run) throw new Error(`No task is called ${task}.`);
    message = { kind: 'last', ok: true, result: await run(input, control) };
  } catch (error) {
    const expected = expectedFailure(error);
    trusted = expected !== null;
    message = { kind: 'last', ok: false, error: expected ?? describe(error) };
  }
  if (trusted && !hasGrown()) return message as PoolResult;
  // Told by the port instead of by an answer: the parent ends this thread, which waits for it.
  send(message);
  return new Promise(() => undefined);
}

function describe(error: unknown): { message: string; stack?: string } {
  return error instanceof Error ? { message: error.message, stack: error.stack } : { message: `Thrown: ${String(error)}` };
}

/** The engine's own refusals carry a code and words for people; Node's and the database's codes are in capitals. */
function expectedFailure(error: unknown): ExpectedFailure | null {
  if (!(error instanceof Error)) return null;
  const { code, status } = error as Error & { code?: unknown; status?: unknown };
  if (typeof code !== 'string' || !/^[a-z][a-z0-9-]*$/.test(code)) return null;
  return { code, message: error.message, status: typeof status === 'number' ? status : 422 };
}

function hasGrown(): boolean {
  const heap = getHeapStatistics();
  return heap.used_heap_size + heap.external_memory + heap.malloced_memory > GROWN_BYTES;
}
