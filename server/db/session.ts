/**
 * One lasting connection a process, beside the pools: it listens for notifications and holds the advisory locks of the jobs
 * in hand. It comes back by itself after a break; locks are gone then, and whoever held them is told.
 */
import pg from 'pg';
import type { Logger } from 'pino';

const RECONNECT_MS = 1000;
/** Without traffic a half-open connection would never be noticed. */
const PING_MS = 15_000;

export class DbSession {
  readonly #url: string;
  readonly #log: Logger;
  readonly #listeners = new Map<string, Set<(payload: string) => void>>();
  readonly #onLost = new Set<() => void>();
  #client: pg.Client | null = null;
  #closed = false;
  #timer: NodeJS.Timeout | undefined;
  #ping: NodeJS.Timeout | undefined;

  constructor(url: string, log: Logger) {
    this.#url = url;
    this.#log = log;
  }

  async open(): Promise<void> {
    const client = new pg.Client({ connectionString: this.#url, application_name: 'inkmuster-session', query_timeout: 4500, connectionTimeoutMillis: 4000, keepAlive: true });
    client.on('error', () => this.#lost(client));
    client.on('end', () => this.#lost(client));
    client.on('notification', ({ channel, payload }) => this.#listeners.get(channel)?.forEach((listener) => listener(payload ?? '')));
    await client.connect();
    for (const channel of this.#listeners.keys()) await client.query(`LISTEN ${client.escapeIdentifier(channel)}`);
    this.#client = client;
    clearInterval(this.#ping);
    this.#ping = setInterval(() => client.query('SELECT 1').catch(() => this.#lost(client)), PING_MS).unref();
  }

  async listen(channel: string, listener: (payload: string) => void): Promise<void> {
    let set = this.#listeners.get(channel);
    if (!set) {
      this.#listeners.set(channel, (set = new Set()));
      await this.#client?.query(`LISTEN ${this.#client.escapeIdentifier(channel)}`);
    }
    set.add(listener);
  }

  /** Told whenever the connection, and with it every lock, was lost. */
  onLost(told: () => void): void {
    this.#onLost.add(told);
  }

  /** False where another process holds it, or while there is no connection. */
  async tryLock(key: string): Promise<boolean> {
    if (!this.#client) return false;
    const { rows } = await this.#client.query<{ held: boolean }>('SELECT pg_try_advisory_lock(hashtextextended($1, 0)) AS held', [key]);
    return rows[0].held;
  }

  async unlock(key: string): Promise<void> {
    await this.#client?.query('SELECT pg_advisory_unlock(hashtextextended($1, 0))', [key]);
  }

  async close(): Promise<void> {
    this.#closed = true;
    clearTimeout(this.#timer);
    clearInterval(this.#ping);
    const client = this.#client;
    this.#client = null;
    await client?.end().catch(() => undefined);
  }

  #lost(client: pg.Client): void {
    if (this.#closed || this.#client !== client) return;
    this.#client = null;
    client.end().catch(() => undefined);
    this.#log.warn('The lasting database connection was lost; trying again.');
    this.#onLost.forEach((told) => told());
    this.#retry();
  }

  #retry(): void {
    clearTimeout(this.#timer);
    this.#timer = setTimeout(() => {
      this.open().catch(() => {
        if (!this.#closed) this.#retry();
      });
    }, RECONNECT_MS);
  }
}
