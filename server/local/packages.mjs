/** npm's packages: installed where they are missing, or where the lock file has changed since they were installed here. */
import { spawnSync } from 'node:child_process';
import { createHash } from 'node:crypto';
import { existsSync, readFileSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { Refusal } from './debian.mjs';

const OLDEST_NODE = [20, 19];

export function ensureNode() {
  const [major, minor] = process.versions.node.split('.').map(Number);
  if (major < OLDEST_NODE[0] || (major === OLDEST_NODE[0] && minor < OLDEST_NODE[1])) throw new Refusal(`Node ${OLDEST_NODE.join('.')} or newer is needed; this is ${process.versions.node}.`);
}

export function ensurePackages(checkout) {
  const modules = join(checkout, 'node_modules');
  const mark = join(modules, '.installed-lock');
  const lock = createHash('sha256').update(readFileSync(join(checkout, 'package-lock.json'))).digest('hex');
  const present = existsSync(join(modules, '.package-lock.json'));
  // Without a mark somebody installed by hand, and knows why.
  if (present && (!existsSync(mark) || readFileSync(mark, 'utf8') === lock)) return;
  console.log('Installing packages (npm ci) …');
  const { status } = spawnSync('npm', ['ci', '--include=dev', '--no-fund', '--no-audit', '--loglevel=error'], { cwd: checkout, stdio: ['ignore', 'inherit', 'inherit'] });
  if (status !== 0) throw new Refusal('npm ci did not succeed; see above.');
  writeFileSync(mark, lock);
}
