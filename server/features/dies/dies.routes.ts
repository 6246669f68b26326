import type { Request } from 'express';
import { dieRoutes } from '../../contract/dies.ts';
import { feature } from '../../feature.ts';
import type { Deps, Feature } from '../../feature.ts';
import { createDieService } from './dies.service.ts';

export function createDies(deps: Deps): Feature {
  const dies = createDieService(deps);
  const actor = ({ person, req }: { person: { id: string }; req: Request }) => ({ id: person.id, address: req.ip ?? 'unknown' });

  return feature({
    table: dieRoutes,
    handlers: {
      'GET /studios/:studioId/die-sets': ({ params, query }) => dies.list(params.studioId, query),
      'POST /studios/:studioId/die-sets': ({ params, body }) => dies.create(params.studioId, body),
      'GET /studios/:studioId/die-sets/:id': ({ params }) => dies.find(params.studioId, params.id),
      'PATCH /studios/:studioId/die-sets/:id': ({ params, body }) => dies.change(params.studioId, params.id, body),
      'DELETE /studios/:studioId/die-sets/:id': (call) => dies.remove(call.params.studioId, call.params.id, actor(call)),
      'POST /studios/:studioId/die-sets/:id/restore': ({ params }) => dies.restore(params.studioId, params.id),
      'POST /studios/:studioId/die-sets/:id/dies': ({ params, body }) => dies.addDies(params.studioId, params.id, body.dies),
      'GET /studios/:studioId/fit-table': ({ params, query }) => dies.fitTable(params.studioId, query),
      'GET /studios/:studioId/dies': ({ params }) => dies.dies(params.studioId),
      'PATCH /studios/:studioId/dies/:id': ({ params, body }) => dies.changeDie(params.studioId, params.id, body),
      'DELETE /studios/:studioId/dies/:id': (call) => dies.removeDie(call.params.studioId, call.params.id, actor(call)),
      'POST /studios/:studioId/dies/:id/restore': ({ params }) => dies.restoreDie(params.studioId, params.id),
    },
  });
}
