/**
 * Fills an empty database with the demo studio and prints its sign-ins as JSON. Run by start.mjs before anybody can use the
 * database; where this is broken off, start.mjs makes the database anew.
 */
import { assemble, createLog } from '../assemble.ts';
import { readConfig } from '../config.ts';
import { migrate } from '../db/migrate.ts';
import type { Deps } from '../feature.ts';

interface SignIn { role: string; email: string; password: string }

const { makeDemo } = (await import(new URL('./demo/index.ts', import.meta.url).href)) as { makeDemo(deps: Deps): Promise<SignIn[]> };
const config = readConfig();
await migrate(config.databaseUrl);
const application = await assemble(config, createLog(config));
try {
  const [{ count }] = await application.deps.db('users').count();
  const signIns = Number(count) === 0 ? await makeDemo(application.deps) : [];
  process.stdout.write(JSON.stringify(signIns));
} finally {
  await application.stop();
}
process.exit(0);
