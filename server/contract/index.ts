/** All routes of the API. A noun's table is added here once. */
import { accountRoutes } from './account.ts';
import { jobRoutes, serverRoutes } from './jobs.ts';
import { studioRoutes } from './studio.ts';

export const apiRoutes = { ...accountRoutes, ...studioRoutes, ...jobRoutes, ...serverRoutes } as const;
