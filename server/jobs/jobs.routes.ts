/** Queued work, and the stream of news. */
import { jobRoutes } from '../contract/jobs.ts';
import { streamEvents } from '../events/stream.ts';
import { feature } from '../feature.ts';
import type { Deps, Feature } from '../feature.ts';
import { ANSWERED } from '../middleware/mount.ts';
import { createJobsService } from './jobs.service.ts';

export function createJobRoutes(deps: Deps): Feature {
  const jobs = createJobsService(deps);
  return feature({
    table: jobRoutes,
    handlers: {
      'GET /studios/:studioId/jobs': async ({ params, query }) => ({ items: await jobs.list(params.studioId, query.subjectId) }),
      'GET /studios/:studioId/jobs/:id': ({ params }) => jobs.find(params.studioId, params.id),
      'POST /studios/:studioId/jobs/:id/cancel': ({ params }) => jobs.cancel(params.studioId, params.id),
      'GET /events': ({ query, req, res }): typeof ANSWERED => {
        streamEvents(deps.events, query.studioId, req, res);
        return ANSWERED;
      },
    },
  });
}
