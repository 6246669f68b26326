/**
 * Worker threads for the engine and for hashing. The parent holds every time limit; a thread that threw something unforeseen,
 * hangs or has grown is ended and replaced, since it cannot be trusted to end itself.
 */
import { MessageChannel } from 'node:worker_threads';
import type { MessagePort } from 'node:worker_threads';
import { fileURLToPath } from 'node:url';
import { Piscina } from 'piscina';
import { AppError } from '../errors/app-error.ts';
import type { RunTotals } from '../engine/gangrun/types.ts';
import type { EnginePool, PoolOptions } from './types.ts';

/** What a thread is handed, beside its input. */
export interface PoolTask {
  task: string;
  input: unknown;
  stop: Int32Array<SharedArrayBuffer>;
  port: MessagePort;
}
/** What comes back by the port. After `last` the thread never settles its task: it waits to be ended. */
export type PoolMessage =
  | { kind: 'progress'; done: number; stage: string }
  | { kind: 'best'; totals: RunTotals }
  | { kind: 'last'; ok: true; result: unknown }
  | { kind: 'last'; ok: false; error: ExpectedFailure | { message: string; stack?: string } };
export interface ExpectedFailure { code: string; message: string; status: number }
/** What a thread that goes on living answers. */
export type PoolResult = { ok: true; result: unknown } | { ok: false; error: ExpectedFailure };

/** As the shell's `nice` has it. */
const BACKGROUND_NICE = 10;
const DEFAULT_LIMIT_MS = 120_000;
/** Asked to stop, the engine gives its best so far within half a second; whoever needs longer does not listen. */
const STOP_GRACE_MS = 2_000;

export interface ClosablePool extends EnginePool { close(): Promise<void> }

export function createEnginePool(threads: number, { inBackground = false } = {}): ClosablePool {
  const piscina = new Piscina({
    filename: fileURLToPath(new URL('./pool-worker.ts', import.meta.url)),
    execArgv: ['--import', new URL('./register-tsx.mjs', import.meta.url).href],
    minThreads: 1,
    maxThreads: threads,
    // Loading OpenCV and the fonts takes a second; a thread that has them is worth keeping.
    idleTimeout: 300_000,
    // Long jobs yield the processors to people's requests.
    ...(inBackground ? { niceIncrement: BACKGROUND_NICE } : {}),
    resourceLimits: { maxOldGenerationSizeMb: 1536 },
  });
  piscina.on('error', () => undefined);

  async function run<T>(task: string, input: unknown, options: PoolOptions = {}): Promise<T> {
    options.signal?.throwIfAborted();
    const { port1, port2 } = new MessageChannel();
    const stop = new Int32Array(new SharedArrayBuffer(4));
    const thread = new AbortController();
    let graceTimer: NodeJS.Timeout | undefined;
    const limitMs = options.timeLimitMs ?? DEFAULT_LIMIT_MS;
    const limitTimer = setTimeout(() => thread.abort('time'), limitMs);
    const onAbort = () => {
      Atomics.store(stop, 0, 1);
      graceTimer = setTimeout(() => thread.abort('stopped'), STOP_GRACE_MS);
    };
    options.signal?.addEventListener('abort', onAbort, { once: true });
    const onFinish = () => Atomics.store(stop, 0, 1);
    if (options.finish?.aborted) onFinish();
    options.finish?.addEventListener('abort', onFinish, { once: true });

    const last = new Promise<PoolResult>((resolve, reject) => {
      port1.on('message', (message: PoolMessage) => {
        if (message.kind === 'progress') return options.onProgress?.(message.done, message.stage);
        if (message.kind === 'best') return options.onBest?.(message.totals);
        if (message.ok) resolve({ ok: true, result: message.result });
        else if ('code' in message.error) resolve({ ok: false, error: message.error });
        else reject(Object.assign(new Error(message.error.message), { stack: message.error.stack }));
        thread.abort('used up');
      });
    });
    try {
      const settled = piscina.run({ task, input, stop, port: port2 } satisfies PoolTask, { transferList: [port2], signal: thread.signal }) as Promise<PoolResult>;
      // An abort after `last` ends the thread, not the answer.
      const outcome = await Promise.race([last, settled.catch((error: unknown) => (thread.signal.reason === 'used up' ? last : Promise.reject(ended(error, thread.signal, limitMs))))]);
      options.signal?.throwIfAborted();
      if (outcome.ok) return outcome.result as T;
      throw new AppError(outcome.error.status, outcome.error.code, outcome.error.message);
    } finally {
      clearTimeout(limitTimer);
      clearTimeout(graceTimer);
      options.signal?.removeEventListener('abort', onAbort);
      options.finish?.removeEventListener('abort', onFinish);
      port1.close();
    }
  }
  return { run, close: () => piscina.destroy() };
}

function ended(error: unknown, signal: AbortSignal, limitMs: number): unknown {
  if (!signal.aborted) return error;
  if (signal.reason === 'time') return new AppError(503, 'took-too-long', `This took longer than ${Math.round(limitMs / 1000)} seconds and was stopped.`);
  return new AppError(409, 'stopped', 'This was stopped.');
}
