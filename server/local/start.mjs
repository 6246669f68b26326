/**
 * `npm start`: from a bare machine with Node to a running Inkmuster. Installs what is missing, keeps a PostgreSQL of its own,
 * builds the pages where they changed, and runs one server process, which it starts again should it die.
 * Plain JavaScript, since nothing is installed yet when it begins.
 */
import { spawn } from 'node:child_process';
import { randomBytes } from 'node:crypto';
import { existsSync, mkdirSync, openSync, readFileSync, renameSync, rmSync, statSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { ensureClient } from './client-build.mjs';
import { checkout, ensurePostgres, freePort, startCluster } from './cluster.mjs';
import { Refusal } from './debian.mjs';
import { startMailbox } from './mailbox.mjs';
import { ensureNode, ensurePackages } from './packages.mjs';

const dev = process.argv.includes('--dev');
const local = join(checkout, '.local');
const FIRST_PORT = 3000;
const LOG_BYTES = 10 * 1024 * 1024;
/** A server that dies sooner than this after its start will not come up by trying again at once. */
const SHORT_LIFE_MS = 5_000;
const RESTART_MS = 1_000;

const stops = [];
let stopping = false;

async function stopAll(code) {
  if (stopping) return;
  stopping = true;
  for (const stop of stops.reverse()) await stop().catch(() => undefined);
  process.exit(code);
}
for (const signal of ['SIGTERM', 'SIGINT', 'SIGHUP']) process.on(signal, () => stopAll(0));

main().catch((error) => {
  console.error(error instanceof Refusal ? `\n${error.message}\n` : error);
  void stopAll(1);
});

async function main() {
  ensureNode();
  const own = !process.env.DATABASE_URL;
  if (own) ensurePostgres();
  ensurePackages(checkout);
  mkdirSync(local, { recursive: true, mode: 0o700 });

  // Both at once; but a failed build is not heard before the cluster is there to be stopped.
  const built = dev ? Promise.resolve() : ensureClient(checkout);
  built.catch(() => undefined);
  const databaseUrl = own ? await ownDatabase() : process.env.DATABASE_URL;
  await built;
  const env = { ...process.env, NODE_ENV: dev ? 'development' : 'production', DATABASE_URL: databaseUrl, SESSION_SECRET: process.env.SESSION_SECRET ?? keptSecret(), STORAGE_FOLDER: process.env.STORAGE_FOLDER ?? join(local, 'files') };
  if (!process.env.SMTP_URL) {
    const folder = join(local, 'mail');
    const mailbox = await startMailbox(folder);
    stops.push(mailbox.stop);
    Object.assign(env, { SMTP_URL: mailbox.url, MAIL_FOLDER: folder });
  }
  const signIns = await demo(env, own);
  const host = process.env.HOST ?? '127.0.0.1';
  const port = await choosePort(host);
  if (dev) await runDevelopment(env, port);
  else await runServer({ ...env, HOST: host, PORT: String(port) });
  if (stopping) return;
  tell(host, port, signIns);
}

async function ownDatabase() {
  const cluster = await startCluster();
  stops.push(() => cluster.stop());
  return cluster.url;
}

/** Made once an installation: sessions outlive a restart by it. */
function keptSecret() {
  const path = join(local, 'secret');
  if (!existsSync(path)) {
    writeFileSync(`${path}.part`, randomBytes(48).toString('base64url'), { mode: 0o600 });
    renameSync(`${path}.part`, path);
  }
  return readFileSync(path, 'utf8');
}

/** Demo data for an empty database: by itself for our own, on request (`DEMO=1`) for another. */
async function demo(env, own) {
  if (!existsSync(join(checkout, 'server/local/demo/index.ts')) || process.env.DEMO === '0' || (!own && process.env.DEMO !== '1')) return [];
  const begun = join(local, 'demo-begun');
  const { default: pg } = await import('pg');
  // Nobody has used a database whose filling was broken off: it is made anew.
  if (own && existsSync(begun)) {
    await remakeDatabase(pg, env.DATABASE_URL);
    rmSync(join(local, 'files'), { recursive: true, force: true });
  } else if (!(await isEmpty(pg, env.DATABASE_URL))) return [];
  console.log('Setting up the demo studio …');
  writeFileSync(begun, '');
  const said = await run(['--import', 'tsx', 'server/local/fill-demo.ts'], { ...env, JOBS: 'off', LOG_LEVEL: 'error' });
  rmSync(begun);
  const signIns = JSON.parse(said || '[]');
  if (signIns.length > 0) writeFileSync(join(local, 'demo-sign-ins.txt'), signIns.map(line).join('\n') + '\n', { mode: 0o600 });
  return signIns;
}

const line = ({ role, email, password }) => `  ${`${role}:`.padEnd(8)} ${email}  ${password}`;

async function isEmpty(pg, url) {
  const client = new pg.Client({ connectionString: url });
  await client.connect();
  try {
    const { rows } = await client.query(`SELECT to_regclass('users') AS users`);
    return rows[0].users === null || (await client.query('SELECT 1 FROM users LIMIT 1')).rowCount === 0;
  } finally {
    await client.end();
  }
}

async function remakeDatabase(pg, url) {
  const name = new URL(url).pathname.slice(1);
  const client = new pg.Client({ connectionString: Object.assign(new URL(url), { pathname: '/postgres' }).href });
  await client.connect();
  try {
    await client.query(`DROP DATABASE IF EXISTS "${name}" WITH (FORCE)`);
    await client.query(`CREATE DATABASE "${name}"`);
  } finally {
    await client.end();
  }
}

function run(args, env) {
  return new Promise((resolve, reject) => {
    const child = spawn(process.execPath, args, { cwd: checkout, env, stdio: ['ignore', 'pipe', 'inherit'] });
    stops.push(async () => void child.kill('SIGKILL'));
    const said = [];
    child.stdout.on('data', (chunk) => said.push(chunk));
    child.once('close', (code) => (code === 0 ? resolve(Buffer.concat(said).toString()) : reject(new Refusal('The demo studio could not be set up; see above. DEMO=0 starts without it.'))));
  });
}

async function choosePort(host) {
  const wanted = Number(process.env.PORT ?? FIRST_PORT);
  for (let port = wanted; port < wanted + 100; port += 1) {
    if (await freePort(port, host).then(() => true, () => false)) {
      if (port !== wanted) console.log(`Port ${wanted} is taken; using ${port}.`);
      return port;
    }
  }
  throw new Refusal(`No port is free from ${wanted} to ${wanted + 99}. Choose one with PORT=….`);
}

/** Runs the server, again whenever it dies. Settles when it first serves. */
function runServer(env) {
  const logPath = join(local, 'server.log');
  if (existsSync(logPath) && statSync(logPath).size > LOG_BYTES) renameSync(logPath, `${logPath}.1`);
  let child = null;
  let served = false;
  stops.push(() => endChild(child));
  return new Promise((resolve, reject) => {
    const begin = () => {
      const log = openSync(logPath, 'a', 0o600);
      const begunAt = Date.now();
      child = spawn(process.execPath, ['--import', 'tsx', 'server/index.ts'], { cwd: checkout, env, stdio: ['ignore', log, log, 'ipc'] });
      child.on('message', (message) => {
        if (message?.serving) {
          served = true;
          resolve();
        }
      });
      child.once('exit', (code, signal) => {
        if (stopping) return;
        if (!served) return reject(new Refusal(`The server did not start. Its last words (${logPath}):\n${readFileSync(logPath, 'utf8').trim().split('\n').slice(-8).join('\n')}`));
        console.log(`The server ended (${signal ?? code}); starting it again.`);
        setTimeout(() => !stopping && begin(), Date.now() - begunAt < SHORT_LIFE_MS ? RESTART_MS * 5 : RESTART_MS);
      });
    };
    begin();
  });
}

async function endChild(child) {
  if (!child || child.exitCode !== null || child.signalCode !== null) return;
  const ended = new Promise((resolve) => child.once('exit', resolve));
  child.kill('SIGTERM');
  const hard = setTimeout(() => child.kill('SIGKILL'), 10_000);
  await ended;
  clearTimeout(hard);
}

/** Vite in front, which shows changes of the client at once; the server starts again when a file of its own changes. */
async function runDevelopment(env, port) {
  const apiPort = await freePort();
  const start = (args, more) => {
    const child = spawn(process.execPath, args, { cwd: checkout, env: { ...env, ...more }, stdio: ['ignore', 'inherit', 'inherit'] });
    stops.push(() => endChild(child));
    child.once('exit', () => stopAll(1));
  };
  start(['--watch-path=server', '--import', 'tsx', 'server/index.ts'], { HOST: '127.0.0.1', PORT: String(apiPort) });
  start(['node_modules/vite/bin/vite.js', '--port', String(port), '--strictPort', '--logLevel', 'warn'], { API_TARGET: `http://127.0.0.1:${apiPort}` });
}

function tell(host, port, signIns) {
  const shown = host === '0.0.0.0' || host === '::' ? '127.0.0.1' : host.includes(':') ? `[${host}]` : host;
  console.log(`\nInkmuster is ready: http://${shown}:${port}/\n`);
  if (signIns.length > 0) {
    console.log('A demo studio is there to look around in. Sign in as');
    signIns.forEach((signIn) => console.log(line(signIn)));
    console.log(`(kept in ${join('.local', 'demo-sign-ins.txt')})\n`);
  }
  console.log('Ctrl+C stops everything.');
}
