/** All routes of the API. A noun's table is added here once. */
import { accountRoutes } from './account.ts';
import { jobRoutes, serverRoutes } from './jobs.ts';
import { stampSetRoutes } from './stamp-sets.ts';
import { studioRoutes } from './studio.ts';

export const apiRoutes = { ...accountRoutes, ...studioRoutes, ...stampSetRoutes, ...jobRoutes, ...serverRoutes } as const;
