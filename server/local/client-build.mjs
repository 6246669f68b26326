/** Builds the client where its sources have changed since the last build, told by their content. */
import { spawn } from 'node:child_process';
import { createHash } from 'node:crypto';
import { existsSync, readdirSync, readFileSync, statSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { stripVTControlCharacters } from 'node:util';
import { Refusal } from './debian.mjs';

/** What ends up in the client: its own files, the contract and the kernels that it shares, the tools' settings and versions. */
const SOURCES = ['src', 'public', 'index.html', 'vite.config.ts', 'package-lock.json', 'server/contract', 'server/engine'];

export async function ensureClient(checkout) {
  const mark = join(checkout, 'dist', 'client.hash');
  const hash = contentHash(checkout);
  if (existsSync(mark) && readFileSync(mark, 'utf8') === hash && existsSync(join(checkout, 'dist', 'client', 'index.html'))) return;
  console.log('Building the pages …');
  const said = [];
  const build = spawn(process.execPath, [join(checkout, 'node_modules/vite/bin/vite.js'), 'build'], { cwd: checkout, stdio: ['ignore', 'pipe', 'pipe'], env: { ...process.env, NODE_ENV: 'production' } });
  for (const stream of [build.stdout, build.stderr]) stream.on('data', (chunk) => said.push(chunk));
  const status = await new Promise((resolve) => build.once('close', resolve));
  if (status !== 0) throw new Refusal(`The pages could not be built:\n${stripVTControlCharacters(Buffer.concat(said).toString()).trim().split('\n').filter((line) => !line.startsWith('    at ')).slice(-15).join('\n')}`);
  writeFileSync(mark, hash);
}

function contentHash(checkout) {
  const hash = createHash('sha256');
  const add = (path) => {
    const full = join(checkout, path);
    if (!existsSync(full)) return;
    if (statSync(full).isDirectory()) {
      for (const name of readdirSync(full).sort()) add(`${path}/${name}`);
      return;
    }
    hash.update(path).update('\0').update(readFileSync(full)).update('\0');
  };
  SOURCES.forEach(add);
  return hash.digest('hex');
}
