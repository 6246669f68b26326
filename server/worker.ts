/** A process that only takes jobs. Any number may run against one database. */
import { assemble, createLog } from './assemble.ts';
import { readConfig } from './config.ts';
import { stopOnSignal } from './process.ts';

const config = readConfig();
const log = createLog(config);
const application = await assemble(config, log);
await application.work();
log.info('taking jobs');
process.send?.({ working: true });
stopOnSignal(log, () => application.stop());
