/** How a process ends, and what does not end it. */
import type { Logger } from 'pino';

/** Whoever asked us to stop will not wait much longer. */
const STOP_MS = 9_000;

export function stopOnSignal(log: Logger, stop: () => Promise<void>): void {
  let stopping = false;
  const begin = (signal: string) => {
    if (stopping) return;
    stopping = true;
    log.info({ signal }, 'stopping');
    setTimeout(() => process.exit(1), STOP_MS).unref();
    stop().then(
      () => process.exit(0),
      (error: unknown) => {
        log.error({ err: error }, 'stopping failed');
        process.exit(1);
      },
    );
  };
  process.on('SIGTERM', begin);
  process.on('SIGINT', begin);
  // Started by start.mjs: where that one was killed, nobody else would end us.
  process.on('disconnect', () => begin('disconnect'));
  // A promise nobody waits for (the queue's own bookkeeping while the database is away, say) is noted; the rest goes on.
  process.on('unhandledRejection', (error) => log.error({ err: error }, 'a rejection nobody waited for'));
}
