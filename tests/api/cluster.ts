/** Once a run: a throw-away PostgreSQL, unless one is given by TEST_DATABASE_URL, and in it the template that every test file copies. */
import { execFileSync } from 'node:child_process';
import { randomBytes } from 'node:crypto';
import { fileURLToPath } from 'node:url';
import pg from 'pg';

export default async function setup(): Promise<(() => Promise<void>) | void> {
  let stop: (() => Promise<void>) | undefined;
  if (!process.env.TEST_DATABASE_URL) {
    const { startCluster } = (await import(new URL('../../server/local/cluster.mjs', import.meta.url).href)) as { startCluster(options: { throwAway: boolean }): Promise<{ url: string; bin: string; stop(): Promise<void> }> };
    const cluster = await startCluster({ throwAway: true });
    process.env.TEST_DATABASE_URL = cluster.url;
    stop = () => cluster.stop();
  }
  // Projects run one after another in one process; the first has made the template.
  if (!process.env.TEST_TEMPLATE) process.env.TEST_TEMPLATE = await makeTemplate(process.env.TEST_DATABASE_URL);
  if (stop) {
    const end = stop;
    return async () => {
      delete process.env.TEST_DATABASE_URL;
      delete process.env.TEST_TEMPLATE;
      await end();
    };
  }
}

async function makeTemplate(url: string): Promise<string> {
  const name = `template_${randomBytes(4).toString('hex')}`;
  const admin = new pg.Client({ connectionString: url });
  await admin.connect();
  await admin.query(`CREATE DATABASE ${name}`);
  await admin.end();
  const script = fileURLToPath(new URL('../../server/db/migrate.ts', import.meta.url));
  // In a process of its own: Knex loads the migrations itself, past the test runner's transforms.
  execFileSync(process.execPath, ['--import', 'tsx', script], { env: { ...process.env, DATABASE_URL: Object.assign(new URL(url), { pathname: `/${name}` }).href }, stdio: ['ignore', 'inherit', 'inherit'] });
  return name;
}
