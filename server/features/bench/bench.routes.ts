import { benchRoutes } from '../../contract/bench.ts';
import { feature } from '../../feature.ts';
import type { Deps, Feature } from '../../feature.ts';
import { createBenchService } from './bench.service.ts';

export function createBench(deps: Deps): Feature {
  const bench = createBenchService(deps);
  return feature({
    table: benchRoutes,
    handlers: {
      'GET /studios/:studioId/batches/:id/bench': ({ params }) => bench.find(params),
      'PUT /studios/:studioId/batches/:id/bench/presses': ({ params, body, person, idempotencyKey }) => bench.record(params, body, person.name, idempotencyKey),
      'POST /studios/:studioId/batches/:id/bench/presses/undo': ({ params, body }) => bench.undo(params, body),
      'PUT /studios/:studioId/batches/:id/bench/impressions': ({ params, body, person }) => bench.mark(params, body, person.name),
      'PUT /studios/:studioId/batches/:id/bench/cut-passes': ({ params, body, person }) => bench.cut(params, body, person.name),
      'POST /studios/:studioId/batches/:id/bench/finish': ({ params }) => bench.finish(params),
    },
  });
}
