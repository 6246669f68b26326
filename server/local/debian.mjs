/** Debian's packages for a machine that has none of them. As root they are installed; anybody else is told the command. */
import { spawnSync } from 'node:child_process';
import { existsSync, mkdirSync, writeFileSync } from 'node:fs';

export const isRoot = process.getuid?.() === 0;

/** A failure that is answered with its words alone, without a trace. */
export class Refusal extends Error {}

export function hasProgram(name) {
  return (process.env.PATH ?? '').split(':').some((folder) => existsSync(`${folder}/${name}`));
}

/** @param {string[]} packages @param {string} purpose @param {string} [otherwise] what else the person may do */
export function installPackages(packages, purpose, otherwise = '') {
  const command = `sudo apt-get update && sudo apt-get install -y --no-install-recommends ${packages.join(' ')}`;
  if (!hasProgram('apt-get')) throw new Refusal(`${purpose} is needed and not installed. Install it with this machine's package manager.${otherwise}`);
  if (!isRoot) throw new Refusal(`${purpose} is needed and not installed. Type:\n\n  ${command}\n${otherwise}`);
  console.log(`Installing ${packages.join(', ')} …`);
  if (packages.some((name) => name.startsWith('postgresql'))) forbidMainCluster();
  const env = { ...process.env, DEBIAN_FRONTEND: 'noninteractive' };
  const run = (...args) => spawnSync('apt-get', ['-o', 'DPkg::Lock::Timeout=120', ...args], { env, encoding: 'utf8', stdio: ['ignore', 'pipe', 'pipe'] });
  const update = run('update');
  const install = run('install', '-y', '--no-install-recommends', ...packages);
  if (install.status !== 0) throw new Refusal(`${packages.join(', ')} could not be installed:\n${(update.stderr + install.stderr).trim().split('\n').slice(-8).join('\n')}`);
}

/** Debian makes and starts a cluster of its own with the first installation; nobody here would use it. */
function forbidMainCluster() {
  const folder = '/etc/postgresql-common/createcluster.d';
  mkdirSync(folder, { recursive: true });
  writeFileSync(`${folder}/no-main-cluster.conf`, 'create_main_cluster = false\n');
}
