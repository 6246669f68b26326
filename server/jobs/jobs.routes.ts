/** Queued work as people see it, and the stream of news. */
import type { Deps, Feature } from '../feature.ts';
import { feature } from '../feature.ts';
import { jobRoutes } from '../contract/jobs.ts';
import type { Job } from '../contract/jobs.ts';
import { notFound } from '../errors/app-error.ts';
import { streamEvents } from '../events/stream.ts';
import { ANSWERED } from '../middleware/mount.ts';
import { findJob, listJobs } from './jobs.queries.ts';
import type { JobRow } from './jobs.queries.ts';

export function createJobRoutes({ db, jobs, events }: Deps): Feature {
  return feature({
    table: jobRoutes,
    handlers: {
      'GET /studios/:studioId/jobs': async ({ params, query }) => ({ items: (await listJobs(db, params.studioId, query.subjectId)).map(toAnswer) }),
      'GET /studios/:studioId/jobs/:id': async ({ params }) => toAnswer(await required(params)),
      'POST /studios/:studioId/jobs/:id/cancel': async ({ params }) => {
        const job = await required(params);
        await jobs.cancel(job.id);
        return toAnswer(await required(params));
      },
      'GET /events': ({ query, req, res }): typeof ANSWERED => {
        streamEvents(events, query.studioId, req, res);
        return ANSWERED;
      },
    },
  });

  async function required(params: { studioId: string; id: string }): Promise<JobRow> {
    const job = await findJob(db, params.id, params.studioId);
    if (!job) throw notFound('This job');
    return job;
  }
}

function toAnswer({ id, studioId, kind, subjectId, state, progress, stage, result, error, createdAt }: JobRow): Job {
  return { id, studioId, kind, subjectId, state, progress, stage, result, error, createdAt };
}
