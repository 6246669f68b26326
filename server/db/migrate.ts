/** Brings the database up to date. Safe to run from several processes at once, and after a process was killed in the middle. */
import { dirname, resolve } from 'node:path';
import { fileURLToPath, pathToFileURL } from 'node:url';
import { createDb } from './database.ts';

const folder = resolve(dirname(fileURLToPath(import.meta.url)), '../../migrations');
/** Any number, the same in every process: whoever holds it migrates. */
const MIGRATION_LOCK = 7_103_921;
const HOUR_MS = 3_600_000;

export async function migrate(url: string): Promise<void> {
  const db = createDb(url, { poolMax: 2, statementMs: HOUR_MS });
  const config = { directory: folder, loadExtensions: ['.ts'] };
  try {
    // Session-level locks belong to one connection; a transaction keeps hold of it.
    await db.transaction(async (tx) => {
      await tx.raw('SELECT pg_advisory_xact_lock(?)', [MIGRATION_LOCK]);
      // Knex marks its own lock in a table, where it outlives a killed process. Whoever holds the advisory lock is alone.
      await db.migrate.forceFreeMigrationsLock(config);
      await db.migrate.latest(config);
    });
  } finally {
    await db.destroy();
  }
}

if (process.argv[1] && import.meta.url === pathToFileURL(process.argv[1]).href) await migrate(process.env.DATABASE_URL ?? '');
