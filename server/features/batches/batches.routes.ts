import type { Request } from 'express';
import { batchRoutes } from '../../contract/batches.ts';
import { planRoutes } from '../../contract/plans.ts';
import { feature } from '../../feature.ts';
import type { Deps, Feature } from '../../feature.ts';
import type { JobDefinition } from '../../jobs/types.ts';
import { createBatchService } from './batches.service.ts';
import type { Actor } from './batches.service.ts';
import { createFitService } from './fit.service.ts';
import { createLineService } from './lines.service.ts';
import { planBatchJob } from './plans.jobs.ts';
import { createPlanService } from './plans.service.ts';
import { compareSheetsJob } from './sheet-sizes.jobs.ts';
import { createStockService } from './stock.service.ts';

export function createBatches(deps: Deps): Feature {
  const batches = createBatchService(deps);
  const lines = createLineService(deps);
  const fits = createFitService(deps);
  const plans = createPlanService(deps);
  const stock = createStockService(deps);
  const actor = ({ person, req }: { person: { id: string; name: string }; req: Request }): Actor => ({ id: person.id, name: person.name, address: req.ip ?? 'unknown' });

  return feature({
    table: { ...batchRoutes, ...planRoutes },
    jobs: [planBatchJob(deps), compareSheetsJob(deps)] as JobDefinition[],
    handlers: {
      'GET /studios/:studioId/batches': ({ params, query }) => batches.list(params.studioId, query),
      'POST /studios/:studioId/batches': ({ params, body }) => batches.create(params.studioId, body),
      'GET /studios/:studioId/batches/:id': ({ params }) => batches.find(params.studioId, params.id),
      'PATCH /studios/:studioId/batches/:id': ({ params, body }) => batches.change(params.studioId, params.id, body),
      'DELETE /studios/:studioId/batches/:id': (call) => batches.remove(call.params.studioId, call.params.id, actor(call)),
      'POST /studios/:studioId/batches/:id/restore': ({ params }) => batches.restore(params.studioId, params.id),
      'POST /studios/:studioId/batches/:id/copy': ({ params, body }) => batches.copy(params.studioId, params.id, body.name),

      'POST /studios/:studioId/batches/:id/lines': ({ params, body }) => lines.add(params.studioId, params.id, body),
      'PATCH /studios/:studioId/batches/:id/lines/:lineId': ({ params, body }) => lines.change(params.studioId, params.id, params.lineId, body),
      'DELETE /studios/:studioId/batches/:id/lines/:lineId': ({ params }) => lines.remove(params.studioId, params.id, params.lineId),
      'POST /studios/:studioId/batches/:id/spread': ({ params }) => lines.spread(params.studioId, params.id),
      'POST /studios/:studioId/batches/:id/for-all': ({ params, body }) => lines.forAll(params.studioId, params.id, body),
      'POST /studios/:studioId/batches/:id/combine': ({ params, body }) => lines.combine(params.studioId, params.id, body),
      'GET /studios/:studioId/batches/:id/fit-table': ({ params }) => fits.fitTable(params.studioId, params.id),
      'POST /studios/:studioId/batches/:id/recommended-dies': ({ params, body }) => fits.takeRecommended(params.studioId, params.id, body.onlyMissing),

      'GET /studios/:studioId/batches/:id/plans': ({ params }) => plans.list(params.studioId, params.id),
      'POST /studios/:studioId/batches/:id/plans': (call) => plans.request(call.params.studioId, call.params.id, call.body, actor(call)),
      'POST /studios/:studioId/batches/:id/plans/stop': ({ params }) => plans.stop(params.studioId, params.id),
      'POST /studios/:studioId/batches/:id/sheet-sizes': (call) => plans.compareSheets(call.params.studioId, call.params.id, actor(call)),
      'GET /studios/:studioId/batches/:id/plans/:planId': ({ params }) => plans.find(params.studioId, params.id, params.planId),
      'POST /studios/:studioId/batches/:id/plans/:planId/choose': (call) => plans.choose(call.params.studioId, call.params.id, call.params.planId, call.body.alternative, actor(call)),
      'GET /studios/:studioId/batches/:id/plans/:planId/stock': ({ params }) => stock.cutting(params.studioId, params.id, params.planId),
    },
  });
}
