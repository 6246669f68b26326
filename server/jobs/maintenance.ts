/** Tidying that nobody waits for: empties the bins after 30 days, drops ended jobs and stray files. One process at a time does it. */
import type { Knex } from 'knex';
import type { Deps } from '../feature.ts';
import { sweepOrphans } from '../storage/file-store.ts';

const EVERY_MS = 3_600_000;
const FIRST_MS = 60_000;
const BIN_DAYS = 30;
const JOB_DAYS = 7;
/** Any number, the same in every process. */
const LOCK = 7_103_922;

export function startMaintenance(deps: Deps): () => Promise<void> {
  const run = () => tidy(deps).catch((error: unknown) => deps.log.warn({ err: error }, 'maintenance'));
  const first = setTimeout(run, FIRST_MS).unref();
  const later = setInterval(run, EVERY_MS).unref();
  return async () => {
    clearTimeout(first);
    clearInterval(later);
  };
}

export async function tidy({ db, files, log }: Pick<Deps, 'db' | 'files' | 'log'>): Promise<void> {
  await db.transaction(async (tx) => {
    const { rows } = await tx.raw('SELECT pg_try_advisory_xact_lock(?) AS mine', [LOCK]);
    if (!rows[0].mine) return;
    await emptyBins(tx);
    await tx('jobs').whereRaw('finished_at < now() - make_interval(days => ?)', [JOB_DAYS]).delete();
    await tx('rate_limits').where('expire', '<', Date.now() - EVERY_MS).delete();
  });
  const swept = await sweepOrphans(db, files);
  if (swept > 0) log.info({ swept }, 'stray files removed');
}

/** Every table with a bin has `deleted_at`. What something living still refers to stays until that is gone. */
async function emptyBins(tx: Knex.Transaction): Promise<void> {
  const { rows } = await tx.raw<{ rows: { table_name: string }[] }>(`SELECT table_name FROM information_schema.columns WHERE table_schema = current_schema() AND column_name = 'deleted_at'`);
  for (const { table_name: table } of rows) {
    await tx
      .transaction((inner) => inner(table).whereRaw('deleted_at < now() - make_interval(days => ?)', [BIN_DAYS]).delete())
      .catch((error: { code?: string }) => {
        if (error.code !== '23503') throw error;
      });
  }
}
