/** All routes of the API. A noun's table is added here once. */
import { accountRoutes } from './account.ts';
import { batchRoutes } from './batches.ts';
import { benchRoutes } from './bench.ts';
import { dieRoutes } from './dies.ts';
import { gearRoutes } from './gear.ts';
import { jobRoutes, serverRoutes } from './jobs.ts';
import { planRoutes } from './plans.ts';
import { stampSetRoutes } from './stamp-sets.ts';
import { studioRoutes } from './studio.ts';
import { templateRoutes } from './templates.ts';

export const apiRoutes = { ...accountRoutes, ...studioRoutes, ...stampSetRoutes, ...dieRoutes, ...gearRoutes, ...batchRoutes, ...planRoutes, ...templateRoutes, ...benchRoutes, ...jobRoutes, ...serverRoutes } as const;
