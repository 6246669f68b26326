/**
 * `npm run backup -- FOLDER`: database and files into a new folder. `npm run restore -- FOLDER [--replace]`: out of it again, into
 * an empty database, or in place of what is there. For an installation whose files lie in a folder; a bucket has its own copies.
 */
import { spawnSync } from 'node:child_process';
import { cpSync, existsSync, mkdirSync, rmSync } from 'node:fs';
import { join, resolve } from 'node:path';
import { checkout, ensurePostgres, startCluster } from './cluster.mjs';
import { Refusal } from './debian.mjs';

const [command, ...rest] = process.argv.slice(2);
const replace = rest.includes('--replace');
const given = rest.find((word) => !word.startsWith('-'));

try {
  if (process.env.STORAGE === 's3') throw new Refusal('Files lie in a bucket, which is copied by its own means; use pg_dump for the database.');
  if (!given) throw new Refusal(`Name a folder: npm run ${command} -- FOLDER`);
  const cluster = process.env.DATABASE_URL ? null : await startCluster();
  try {
    const place = { url: process.env.DATABASE_URL ?? cluster.url, bin: ensurePostgres(), files: resolve(process.env.STORAGE_FOLDER ?? join(checkout, '.local', 'files')), folder: resolve(given) };
    await (command === 'restore' ? restore(place) : backup(place));
  } finally {
    await cluster?.stop();
  }
} catch (error) {
  console.error(error instanceof Refusal ? error.message : error);
  process.exitCode = 1;
}

/** The database first: files are written before rows point to them and are never changed, so every row's file is in the copy. */
async function backup({ url, bin, files, folder }) {
  if (existsSync(folder)) throw new Refusal(`${folder} exists already.`);
  mkdirSync(folder, { recursive: true, mode: 0o700 });
  pg(bin, 'pg_dump', url, ['--format=custom', '--no-owner', `--file=${join(folder, 'database.dump')}`]);
  if (existsSync(files)) cpSync(files, join(folder, 'files'), { recursive: true });
  console.log(`Kept in ${folder}.`);
}

async function restore({ url, bin, files, folder }) {
  const dump = join(folder, 'database.dump');
  if (!existsSync(dump)) throw new Refusal(`There is no backup in ${folder}.`);
  await makeRoom(url);
  pg(bin, 'pg_restore', url, ['--no-owner', '--single-transaction', dump]);
  rmSync(files, { recursive: true, force: true });
  if (existsSync(join(folder, 'files'))) cpSync(join(folder, 'files'), files, { recursive: true });
  console.log('Restored.');
}

async function makeRoom(url) {
  const { default: driver } = await import('pg');
  const client = new driver.Client({ connectionString: url });
  await client.connect();
  try {
    const { rows } = await client.query(`SELECT to_regclass('users') IS NOT NULL AS filled`);
    if (!rows[0].filled) return;
    if (!replace) throw new Refusal('The database is not empty. Stop the server and add --replace to put the backup in its place; what is there now will be lost.');
    await client.query('DROP SCHEMA IF EXISTS pgboss CASCADE; DROP SCHEMA public CASCADE; CREATE SCHEMA public');
  } finally {
    await client.end();
  }
}

/** The password goes by the environment: arguments can be read by everybody on the machine. */
function pg(bin, program, url, args) {
  const { hostname, port, username, password, pathname } = new URL(url);
  const env = { ...process.env, PGHOST: hostname, PGPORT: port || '5432', PGUSER: decodeURIComponent(username), PGPASSWORD: decodeURIComponent(password) };
  const { status, stderr } = spawnSync(join(bin, program), [...args.slice(0, -1), `--dbname=${pathname.slice(1)}`, args.at(-1)], { env, encoding: 'utf8', stdio: ['ignore', 'inherit', 'pipe'] });
  if (status !== 0) throw new Refusal(`${program} did not succeed:\n${stderr.trim().split('\n').slice(-6).join('\n')}`);
}
