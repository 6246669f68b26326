/**
 * `npm test`: from a bare machine to a verdict. Installs what is missing, runs type check, lint and all tests on a throw-away
 * PostgreSQL, and leaves nothing running. `--long` has the full counts of fault, fuzz and random tests; further words choose
 * projects (`npm test -- api faults`).
 */
import { spawn } from 'node:child_process';
import { existsSync, readFileSync, rmSync } from 'node:fs';
import { availableParallelism, tmpdir } from 'node:os';
import { join } from 'node:path';
import { checkout, ensurePostgres, startCluster } from './cluster.mjs';
import { hasProgram, installPackages, Refusal } from './debian.mjs';
import { ensureNode, ensurePackages } from './packages.mjs';

const long = process.argv.includes('--long');
const chosen = process.argv.slice(2).filter((word) => !word.startsWith('-'));
/** Engine and client need no server; the others share the cluster, and the last two the machine's ports and processors too. */
const STEPS = [
  { name: 'typecheck', command: ['npm', 'run', '--silent', 'typecheck'] },
  { name: 'lint', command: ['npm', 'run', '--silent', 'lint'] },
  { name: 'engine and client', projects: ['engine', 'client'] },
  { name: 'api', projects: ['api'] },
  { name: 'browser', projects: ['browser'] },
  { name: 'faults', projects: ['faults'] },
];
const MINUTES = 60_000;
/** A step that hangs is ended; the long run may take its time. */
const STEP_LIMIT_MS = (long ? 120 : 10) * MINUTES;

let cluster = null;
let child = null;
let ended = false;

async function end(code) {
  if (ended) return;
  ended = true;
  if (child) killGroup(child);
  await cluster?.stop();
  process.exit(code);
}
for (const signal of ['SIGTERM', 'SIGINT', 'SIGHUP']) process.on(signal, () => end(130));

main().catch(async (error) => {
  console.error(error instanceof Refusal ? `\n${error.message}\n` : error);
  await end(1);
});

async function main() {
  ensureNode();
  ensurePostgres();
  const missing = [...(findChromium() ? [] : ['chromium']), ...(hasProgram('pdftoppm') ? [] : ['poppler-utils'])];
  if (missing.length > 0) installPackages(missing, missing.map((name) => ({ chromium: 'Chromium', 'poppler-utils': 'pdftoppm' })[name]).join(' and '));
  ensurePackages(checkout);
  cluster = await startCluster({ throwAway: true });
  const env = { ...process.env, TEST_DATABASE_URL: cluster.url, CHROMIUM: findChromium(), ...(long ? { LONG: '1' } : {}) };
  delete env.NODE_ENV;
  if (!process.stdout.isTTY) env.NO_COLOR = '1';

  const total = { passed: 0, failed: 0 };
  for (const step of STEPS) {
    if (chosen.length > 0 && !chosen.some((word) => step.name.includes(word))) continue;
    const started = Date.now();
    const counts = step.projects ? await runProjects(step, env) : await runCommand(step, env);
    total.passed += counts.passed;
    total.failed += counts.failed;
    console.log(`${step.name}: ${counts.failed === 0 ? 'good' : 'FAILED'}, ${Math.round((Date.now() - started) / 1000)} s`);
  }
  console.log(`\n${total.passed} passed, ${total.failed} failed`);
  await end(total.failed === 0 ? 0 : 1);
}

async function runCommand(step, env) {
  const code = await run(step.command, env);
  return { passed: code === 0 ? 1 : 0, failed: code === 0 ? 0 : 1 };
}

async function runProjects(step, env) {
  const report = join(tmpdir(), `inkmuster-test-${process.pid}.json`);
  rmSync(report, { force: true });
  const args = [join(checkout, 'node_modules/vitest/vitest.mjs'), 'run', '--passWithNoTests', `--maxWorkers=${availableParallelism()}`, ...step.projects.flatMap((name) => ['--project', name]), '--reporter=dot', '--reporter=json', `--outputFile.json=${report}`];
  const code = await run([process.execPath, ...args], env);
  if (!existsSync(report)) return { passed: 0, failed: code === 0 ? 0 : 1 };
  const { numPassedTests: passed, numFailedTests: failed, numFailedTestSuites: suites } = JSON.parse(readFileSync(report, 'utf8'));
  rmSync(report, { force: true });
  // A file that could not be loaded, or an error outside of any test, has no failed test of its own.
  return { passed, failed: failed > 0 || code === 0 ? failed : Math.max(1, suites) };
}

/** In a process group of its own, so that nothing it began outlives it. */
function run([program, ...args], env) {
  return new Promise((resolve) => {
    const begun = spawn(program, args, { cwd: checkout, env, stdio: ['ignore', 'inherit', 'inherit'], detached: true });
    child = begun;
    const timer = setTimeout(() => {
      console.log(`Ended after ${STEP_LIMIT_MS / MINUTES} minutes.`);
      killGroup(begun);
    }, STEP_LIMIT_MS);
    begun.once('close', (code) => {
      clearTimeout(timer);
      killGroup(begun);
      child = null;
      resolve(code ?? 1);
    });
  });
}

function killGroup({ pid }) {
  try {
    process.kill(-pid, 'SIGKILL');
  } catch {
    // It is empty already.
  }
}

function findChromium() {
  if (process.env.CHROMIUM) return process.env.CHROMIUM;
  return ['/usr/bin/chromium', '/usr/bin/chromium-browser', '/usr/bin/google-chrome'].find((path) => existsSync(path)) ?? null;
}
