/** The Knex instance, transactions, ids. */
import knexFactory from 'knex';
import type { Knex } from 'knex';
import pg from 'pg';
import { v7 } from 'uuid';

/** A statement that takes longer has met a frozen database or a missing index; people get an error instead of a hanging page. */
const STATEMENT_MS = 4500;
const CONNECT_MS = 4000;

// Counts come as bigint, which the driver hands over as text; none of ours passes 2^53.
pg.types.setTypeParser(pg.types.builtins.INT8, Number);

export function createDb(url: string, options: { poolMax?: number; statementMs?: number } = {}): Knex {
  const statementMs = options.statementMs ?? STATEMENT_MS;
  return knexFactory({
    client: 'pg',
    connection: { connectionString: url, application_name: 'inkmuster', query_timeout: statementMs, connectionTimeoutMillis: CONNECT_MS, keepAlive: true } as Knex.PgConnectionConfig,
    pool: { min: 0, max: options.poolMax ?? 10 },
    acquireConnectionTimeout: CONNECT_MS,
  });
}

/** For packages that want a driver pool of their own: the session store, the queue. */
export function createDriverPool(url: string, max: number, onError: (error: Error) => void): pg.Pool {
  const pool = new pg.Pool({ connectionString: url, max, application_name: 'inkmuster', query_timeout: STATEMENT_MS, connectionTimeoutMillis: CONNECT_MS, keepAlive: true });
  // An idle connection that breaks is an event of the pool; unheard it would end the process.
  pool.on('error', onError);
  return pool;
}

/** Runs in the transaction at hand, or in one of its own. */
export function inTransaction<T>(db: Knex, work: (tx: Knex.Transaction) => Promise<T>): Promise<T> {
  return db.isTransaction ? work(db as Knex.Transaction) : db.transaction(work);
}

/** Ids that sort by the time they were made; not for tokens, which must not be guessable. */
export const newId = (): string => v7();
