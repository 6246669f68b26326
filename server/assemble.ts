/** Puts together what every process needs, server and worker alike, and takes it apart again. */
import { pino } from 'pino';
import type { Logger } from 'pino';
import type pg from 'pg';
import type { Config } from './config.ts';
import { createDb, createDriverPool } from './db/database.ts';
import { DbSession } from './db/session.ts';
import { createEvents } from './events/pg-events.ts';
import type { Deps, Feature } from './feature.ts';
import { createFeatures } from './features/registry.ts';
import { createEnginePool } from './jobs/engine-pool.ts';
import { startMaintenance } from './jobs/maintenance.ts';
import { createQueue } from './jobs/queue.ts';
import { startRunner } from './jobs/runner.ts';
import { createMailer } from './mail/mailer.ts';
import { createFileStore } from './storage/file-store.ts';

/** Passwords and what is computed within a request must not wait behind long jobs. */
const REQUEST_THREADS = 2;

export interface Application {
  deps: Deps;
  features: Feature[];
  /** For the session store. */
  pool: pg.Pool;
  /** Takes jobs from now on. */
  work(): Promise<void>;
  stop(): Promise<void>;
}

export function createLog(config: Pick<Config, 'logLevel'>): Logger {
  // To standard error: what start.mjs says to people stays readable.
  return pino({ level: config.logLevel, base: undefined, redact: ['password', '*.password', 'cookie', '*.cookie'] }, pino.destination({ fd: 2, sync: false }));
}

export async function assemble(config: Config, log: Logger): Promise<Application> {
  const db = createDb(config.databaseUrl, { poolMax: config.dbPoolMax });
  const pool = createDriverPool(config.databaseUrl, Math.min(4, config.dbPoolMax), (error) => log.warn({ err: error }, 'an idle database connection broke'));
  const session = new DbSession(config.databaseUrl, log);
  await session.open();
  const events = await createEvents(session);
  const queue = await createQueue(db, pool, events, log);
  const engine = createEnginePool(REQUEST_THREADS);
  const deps: Deps = { db, files: await createFileStore(config, db), jobs: queue, events, engine, mail: createMailer(config), config, log };
  const features = createFeatures(deps);
  queue.define(features.flatMap((feature) => feature.jobs));

  const stops: (() => Promise<void>)[] = [];
  return {
    deps,
    features,
    pool,
    async work() {
      const threads = createEnginePool(config.jobThreads, { inBackground: true });
      const runner = await startRunner({ db, session, queue, events, engine: threads, log, threads: config.jobThreads, delayMs: config.jobDelayMs });
      stops.push(startMaintenance(deps), () => runner.stop(), () => threads.close());
    },
    async stop() {
      for (const stop of stops) await stop();
      await queue.stop();
      await engine.close();
      await session.close();
      await pool.end();
      await db.destroy();
    },
  };
}
