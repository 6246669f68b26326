/** `npm run bench`: runs `tests/benchmarks/*.ts` one by one and prints each as a table; words choose by name, `--json` prints figures for programs. */
import { spawnSync } from 'node:child_process';
import { readdirSync, readFileSync } from 'node:fs';
import { join } from 'node:path';
import { checkout, startCluster } from './cluster.mjs';

const json = process.argv.includes('--json');
const words = process.argv.slice(2).filter((word) => !word.startsWith('-'));
const folder = join(checkout, 'tests/benchmarks');
const names = readdirSync(folder).filter(isBenchmark).sort().filter((name) => words.length === 0 || words.some((word) => name.includes(word)));

/** Benchmarks of lists and pages need a database; they get a throw-away one by TEST_DATABASE_URL. */
const cluster = await startCluster({ throwAway: true });
const tables = [];
let failed = false;
for (const name of names) {
  // Each in a process of its own: none warms up or burdens the next.
  const script = `const { run } = await import(${JSON.stringify(join(folder, name))}); process.stdout.write('\\n@@' + JSON.stringify(await run({ json: ${json} })) + '\\n'); process.exit(0);`;
  const { stdout, status } = spawnSync(process.execPath, ['--import', 'tsx', '--input-type=module', '-e', script], { cwd: checkout, encoding: 'utf8', stdio: ['ignore', 'pipe', 'inherit'], env: { ...process.env, TEST_DATABASE_URL: cluster.url }, maxBuffer: 64 * 1024 * 1024 });
  const line = stdout?.split('\n').find((text) => text.startsWith('@@'));
  if (status !== 0 || !line) {
    failed = true;
    console.error(`${name} did not finish.`);
    continue;
  }
  const table = { name, ...JSON.parse(line.slice(2)) };
  tables.push(table);
  if (!json) show(table);
}
await cluster.stop();
if (json) console.log(JSON.stringify(tables, null, 2));
process.exit(failed ? 1 : 0);

/** Others in the folder are what benchmarks share. */
function isBenchmark(name) {
  return name.endsWith('.ts') && /^export (async )?function run\b/m.test(readFileSync(join(folder, name), 'utf8'));
}

function show({ title, columns, rows }) {
  const cells = [columns, ...rows].map((row) => row.map(String));
  const widths = columns.map((_, i) => Math.max(...cells.map((row) => (row[i] ?? '').length)));
  const line = (row) => `| ${row.map((cell, i) => (i === 0 ? cell.padEnd(widths[i]) : cell.padStart(widths[i]))).join(' | ')} |`;
  console.log(`\n${title}\n`);
  console.log([line(cells[0]), `|${widths.map((w, i) => (i === 0 ? '-'.repeat(w + 2) : `${'-'.repeat(w + 1)}:`)).join('|')}|`, ...cells.slice(1).map(line)].join('\n'));
}
