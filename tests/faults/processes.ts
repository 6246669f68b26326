/** Real server and worker processes on a real database, to be killed; and a person who talks to them over HTTP. */
import { spawn } from 'node:child_process';
import type { ChildProcess } from 'node:child_process';
import { randomBytes } from 'node:crypto';
import { mkdtempSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join, resolve } from 'node:path';
import { fileURLToPath } from 'node:url';
import pg from 'pg';

export const root = resolve(fileURLToPath(new URL('../..', import.meta.url)));

export interface Cluster { url: string; folder: string; start(): Promise<void>; stop(mode?: string): Promise<void> }

/** A cluster of the test's own, so that it may be stopped. */
export async function ownCluster(): Promise<Cluster> {
  const { startCluster } = (await import(new URL('../../server/local/cluster.mjs', import.meta.url).href)) as { startCluster(options: { throwAway: boolean }): Promise<Cluster> };
  return startCluster({ throwAway: true });
}

export interface Process { child: ChildProcess; port: number; kill(signal?: NodeJS.Signals): Promise<void>; log(): string }

const started = new Set<ChildProcess>();

/** Processes started with it share database, files and secret, with no other installation's. */
export async function installation(cluster: Cluster, env: Record<string, string> = {}) {
  const databaseUrl = await newDatabase(cluster.url);
  const base = {
    PATH: process.env.PATH, HOME: process.env.HOME, DATABASE_URL: databaseUrl, SESSION_SECRET: 'only for tests, only for tests, only', PORT: '0', LOG_LEVEL: 'warn',
    STORAGE_FOLDER: join(mkdtempSync(join(tmpdir(), 'inkmuster-fault-')), 'files'), JOB_THREADS: '1', ...env,
  };
  const begin = (script: string, more: Record<string, string>): Promise<Process> =>
    new Promise((resolveProcess, reject) => {
      const child = spawn(process.execPath, ['--import', 'tsx', script], { cwd: root, env: { ...base, ...more }, stdio: ['ignore', 'pipe', 'pipe', 'ipc'] });
      started.add(child);
      let said = '';
      for (const stream of [child.stdout!, child.stderr!]) stream.on('data', (chunk) => (said += chunk));
      const ended = new Promise<void>((done) => child.once('exit', () => done()));
      child.once('exit', (code) => reject(new Error(`${script} ended with ${code}:\n${said}`)));
      child.on('message', (message: { serving?: number }) => {
        resolveProcess({
          child,
          port: message.serving ?? 0,
          log: () => said,
          kill: (signal = 'SIGKILL') => {
            child.kill(signal);
            return ended;
          },
        });
      });
    });
  return {
    databaseUrl,
    server: (more: Record<string, string> = {}) => begin('server/index.ts', more),
    worker: (more: Record<string, string> = {}) => begin('server/worker.ts', more),
  };
}

async function newDatabase(url: string): Promise<string> {
  const name = `fault_${randomBytes(4).toString('hex')}`;
  const admin = new pg.Client({ connectionString: url });
  await admin.connect();
  await admin.query(`CREATE DATABASE ${name}`);
  await admin.end();
  return Object.assign(new URL(url), { pathname: `/${name}` }).href;
}

/** For the end of a test file, whatever happened in it. */
export function endAll(): void {
  for (const child of started) if (child.exitCode === null) child.kill('SIGKILL');
}

export interface Client {
  studioId: string;
  call(method: string, path: string, body?: object | FormData): Promise<{ status: number; body: Record<string, unknown> }>;
  on(port: number): Client;
}

/** Registers a new person. `on` follows her to another process. */
export async function newClient(port: number): Promise<Client> {
  const answer = await fetch(`http://127.0.0.1:${port}/api/account`, {
    method: 'POST',
    headers: { 'Content-Type': 'application/json' },
    body: JSON.stringify({ name: 'Fern Waite', email: `${randomBytes(5).toString('hex')}@studio.example`, password: 'seven quiet herons 42' }),
  });
  if (answer.status !== 201) throw new Error(`Registering was answered with ${answer.status}: ${await answer.text()}`);
  const cookie = answer.headers.getSetCookie()[0].split(';')[0];
  const info = (await answer.json()) as { csrfToken: string; studios: { id: string }[] };
  return client(port, cookie, info.csrfToken, info.studios[0].id);
}

function client(port: number, cookie: string, csrfToken: string, studioId: string): Client {
  return {
    studioId,
    on: (other) => client(other, cookie, csrfToken, studioId),
    async call(method, path, body) {
      const form = body instanceof FormData;
      const answer = await fetch(`http://127.0.0.1:${port}/api${path.replace(':studioId', studioId)}`, {
        method,
        headers: { Cookie: cookie, 'X-CSRF-Token': csrfToken, ...(body && !form ? { 'Content-Type': 'application/json' } : {}) },
        ...(body ? { body: form ? body : JSON.stringify(body) } : {}),
        signal: AbortSignal.timeout(15_000),
      });
      const text = await answer.text();
      return { status: answer.status, body: text ? (JSON.parse(text) as Record<string, unknown>) : {} };
    },
  };
}

export async function until<T>(what: string, look: () => Promise<T | null | undefined | false>, limitMs: number): Promise<T> {
  const end = Date.now() + limitMs;
  while (Date.now() < end) {
    const found = await look().catch(() => null);
    if (found) return found;
    await new Promise((go) => setTimeout(go, 100));
  }
  throw new Error(`${what}: not within ${limitMs} ms.`);
}
