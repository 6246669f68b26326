/** `npm start` as a person runs it, in a copy of the checkout with a cluster of its own: started, used, killed, started again, stopped. */
import { spawn, spawnSync } from 'node:child_process';
import type { ChildProcess } from 'node:child_process';
import { createHash } from 'node:crypto';
import { cpSync, existsSync, mkdtempSync, readdirSync, readFileSync, rmSync, symlinkSync } from 'node:fs';
import { createServer } from 'node:net';
import type { AddressInfo, Server } from 'node:net';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { newClient, root, until } from './processes.ts';
import type { Client } from './processes.ts';

/** What `npm start` needs of a checkout; packages are borrowed. */
const NEEDED = ['server', 'src', 'public', 'migrations', 'index.html', 'package.json', 'package-lock.json', 'tsconfig.json', 'vite.config.ts', 'dist'];
const FIRST_START_MS = 110_000;
const SECOND_START_MS = 8_000;

let copy: string;
let clusterFolder: string;
const begun: ChildProcess[] = [];

beforeAll(() => {
  copy = mkdtempSync(join(tmpdir(), 'inkmuster-start-'));
  for (const name of NEEDED) if (existsSync(join(root, name))) cpSync(join(root, name), join(copy, name), { recursive: true });
  symlinkSync(join(root, 'node_modules'), join(copy, 'node_modules'));
  clusterFolder = process.getuid?.() === 0 ? `/var/lib/postgresql/inkmuster-${createHash('sha256').update(copy).digest('hex').slice(0, 12)}` : join(copy, '.local/pg');
});
afterAll(() => {
  killEverything();
  rmSync(copy, { recursive: true, force: true });
  rmSync(clusterFolder, { recursive: true, force: true });
});

interface Run { child: ChildProcess; said(): string; port: number; tookMs: number; ended: Promise<number | null> }

async function start(env: Record<string, string> = {}, limitMs = FIRST_START_MS): Promise<Run> {
  const { DATABASE_URL: _url, TEST_DATABASE_URL: _test, PORT: _port, NODE_ENV: _env, VITEST: _vitest, ...inherited } = process.env;
  const at = Date.now();
  const child = spawn(process.execPath, ['server/local/start.mjs'], { cwd: copy, env: { ...inherited, DEMO: '0', ...env }, stdio: ['ignore', 'pipe', 'pipe'] });
  begun.push(child);
  let said = '';
  for (const stream of [child.stdout!, child.stderr!]) stream.on('data', (chunk) => (said += chunk));
  const ended = new Promise<number | null>((resolve) => child.once('exit', resolve));
  const address = await Promise.race([
    until('an address', async () => /http:\/\/127\.0\.0\.1:(\d+)\//.exec(said), limitMs),
    ended.then((code) => Promise.reject(new Error(`npm start ended with ${code}:\n${said}`))),
  ]);
  return { child, said: () => said, port: Number(address[1]), tookMs: Date.now() - at, ended };
}

/** Processes that work in the copy or on its cluster. */
function family(): { pid: number; command: string }[] {
  return readdirSync('/proc').filter((name) => /^\d+$/.test(name)).flatMap((pid) => {
    try {
      const command = readFileSync(`/proc/${pid}/cmdline`, 'utf8').replaceAll('\0', ' ');
      const cwd = spawnSync('readlink', [`/proc/${pid}/cwd`], { encoding: 'utf8' }).stdout.trim();
      return cwd.startsWith(copy) || cwd.startsWith(clusterFolder) ? [{ pid: Number(pid), command }] : [];
    } catch {
      return [];
    }
  });
}

function killEverything(): void {
  for (const { pid } of family()) {
    try {
      process.kill(pid, 'SIGKILL');
    } catch {
      // It went by itself.
    }
  }
}

describe('npm start', () => {
  let person: Client;
  let blocker: Server | undefined;

  it('serves the pages, and says exactly one address', async () => {
    const run = await start({ PORT: '3950' });
    const page = await fetch(`http://127.0.0.1:${run.port}/some/page`);
    expect(page.status).toBe(200);
    expect(await page.text()).toContain('<div id="app"');
    expect(run.said().match(/https?:\/\//g)).toHaveLength(1);
    person = await newClient(run.port);
    expect((await person.call('POST', '/studios', { name: 'Kept through everything' })).status).toBe(201);
  }, FIRST_START_MS + 10_000);

  it('comes up again within 8 s after everything was killed with -9, with the data there and the person signed in', async () => {
    killEverything();
    const run = await start({ PORT: '3950' });
    expect(run.tookMs).toBeLessThan(SECOND_START_MS);
    const { body } = await person.on(run.port).call('GET', '/studios');
    expect((body.items as { name: string }[]).map((s) => s.name)).toContain('Kept through everything');
    run.child.kill('SIGTERM');
    expect(await run.ended).toBe(0);
    await until('nothing is left running', async () => family().length === 0, 3_000);
  }, 60_000);

  it('adopts its database where only that was left running', async () => {
    const first = await start({ PORT: '3950' });
    const postmaster = family().find(({ command }) => command.includes('/postgres -D'))!;
    for (const { pid, command } of family()) if (command.includes('start.mjs')) process.kill(pid, 'SIGKILL');
    await first.ended;
    // The server notices that nobody looks after it any more.
    await until('the server ends', async () => !family().some(({ command }) => command.includes('server/index.ts')), 12_000);
    const second = await start({ PORT: '3950' });
    expect(family().some(({ pid }) => pid === postmaster.pid)).toBe(true);
    second.child.kill('SIGTERM');
    await second.ended;
    await until('nothing is left running', async () => family().length === 0, 3_000);
  }, 60_000);

  it('takes another port where its own is taken, and says so; starts its server again when that dies', async () => {
    blocker = createServer();
    await new Promise<void>((resolve) => blocker!.listen(0, '127.0.0.1', resolve));
    const { port } = blocker.address() as AddressInfo;
    const run = await start({ PORT: String(port) });
    expect(run.port).not.toBe(port);
    expect(run.said()).toContain(`Port ${port} is taken; using ${run.port}.`);
    const server = family().find(({ command }) => command.includes('server/index.ts'))!;
    process.kill(server.pid, 'SIGKILL');
    await until('the server answers again', async () => (await fetch(`http://127.0.0.1:${run.port}/api/health/ready`)).status === 200, 15_000);
    run.child.kill('SIGTERM');
    expect(await run.ended).toBe(0);
    await until('nothing is left running', async () => family().length === 0, 3_000);
    blocker.close();
  }, 60_000);

  it('on a given database starts none of its own', async () => {
    const url = Object.assign(new URL(process.env.TEST_DATABASE_URL!), { pathname: '/postgres' }).href;
    const run = await start({ PORT: '3950', DATABASE_URL: url });
    expect(family().some(({ command }) => command.includes('postgres'))).toBe(false);
    expect((await fetch(`http://127.0.0.1:${run.port}/api/health/ready`)).status).toBe(200);
    run.child.kill('SIGTERM');
    await run.ended;
  }, 60_000);

  it('tells an ordinary user without PostgreSQL the command to type, within 5 s', () => {
    // An ordinary user's view: nothing in the PATH, Debian's folder out of sight.
    const script = `process.getuid = () => 1000; const fs = await import('node:module'); const { createRequire, syncBuiltinESMExports } = fs; const real = createRequire('file:///x.js')('node:fs'); const seen = real.existsSync;
      real.existsSync = (path) => !String(path).startsWith('/usr/lib/postgresql') && !String(path).endsWith('/initdb') && seen(path); syncBuiltinESMExports(); await import(${JSON.stringify(join(copy, 'server/local/start.mjs'))});`;
    const at = Date.now();
    const { stderr, status } = spawnSync(process.execPath, ['--input-type=module', '-e', script], { cwd: copy, encoding: 'utf8', env: { PATH: process.env.PATH, HOME: copy } });
    expect(Date.now() - at).toBeLessThan(5_000);
    expect(status).toBe(1);
    expect(stderr).toContain('sudo apt-get install -y --no-install-recommends postgresql'.replace('sudo apt-get install', 'sudo apt-get update && sudo apt-get install'));
    expect(stderr).toContain('DATABASE_URL=postgres://');
  });
});
