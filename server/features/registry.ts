/** Every noun of the application, put together once. A new noun is listed here and nowhere else. */
import type { Deps, Feature } from '../feature.ts';
import { createJobRoutes } from '../jobs/jobs.routes.ts';
import { createAccount } from './account/account.routes.ts';
import { createBatches } from './batches/batches.routes.ts';
import { createBench } from './bench/bench.routes.ts';
import { createDies } from './dies/dies.routes.ts';
import { createGear } from './gear/gear.routes.ts';
import { createStampSets } from './stamp-sets/stamp-sets.routes.ts';
import { createStudio } from './studio/studio.routes.ts';
import { createTemplates } from './templates/templates.routes.ts';

export function createFeatures(deps: Deps): Feature[] {
  return [createAccount(deps), createStudio(deps), createStampSets(deps), createDies(deps), createGear(deps), createBatches(deps), createTemplates(deps), createBench(deps), createJobRoutes(deps)];
}
