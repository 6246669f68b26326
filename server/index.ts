/** A server process: brings the database up to date, serves, and unless told otherwise also takes jobs. Stops cleanly on SIGTERM. */
import { createServer } from 'node:http';
import type { AddressInfo } from 'node:net';
import { createApp } from './app.ts';
import { assemble, createLog } from './assemble.ts';
import { readConfig } from './config.ts';
import { migrate } from './db/migrate.ts';
import { stopOnSignal } from './process.ts';

/** Requests under way may finish; streams are cut. */
const DRAIN_MS = 3_000;

const config = readConfig();
const log = createLog(config);
await migrate(config.databaseUrl);
const application = await assemble(config, log);
const server = createServer(createApp(application));
// Slow senders of headers hold no connection; a whole upload over a phone's line may take minutes.
server.headersTimeout = 20_000;
server.requestTimeout = 10 * 60_000;

await new Promise<void>((resolve, reject) => server.once('error', reject).listen(config.port, config.host, resolve));
if (config.takesJobs) await application.work();
const { port } = server.address() as AddressInfo;
log.info({ host: config.host, port }, 'serving');
process.send?.({ serving: port });

stopOnSignal(log, async () => {
  const closed = new Promise((resolve) => server.close(resolve));
  server.closeIdleConnections();
  setTimeout(() => server.closeAllConnections(), DRAIN_MS).unref();
  // The job runner hands its work back meanwhile.
  await Promise.race([closed, new Promise((resolve) => setTimeout(resolve, DRAIN_MS + 500).unref())]);
  await application.stop();
});
