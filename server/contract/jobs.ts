/** Queued work, news by server-sent events, and what the server says of itself. */
import { z } from 'zod';
import { routes } from './route.ts';
import { Id, Instant, StudioItemParams, StudioParams } from './shared.ts';

export const JobState = z.enum(['queued', 'running', 'done', 'failed', 'cancelled']);

export const Job = z.object({
  id: Id,
  studioId: Id,
  kind: z.string(),
  /** The stamp set, the batch it is about. */
  subjectId: Id.nullable(),
  state: JobState,
  /** 0 to 1. */
  progress: z.number(),
  stage: z.string(),
  result: z.unknown(),
  error: z.object({ code: z.string(), message: z.string() }).nullable(),
  createdAt: Instant,
});
export type Job = z.infer<typeof Job>;

export const jobRoutes = routes({
  'GET /studios/:studioId/jobs': {
    summary: 'Work waiting or running, and what ended in the last ten minutes; newest first', access: 'helper', params: StudioParams,
    query: z.object({ subjectId: Id.optional() }), response: z.object({ items: z.array(Job) }),
  },
  'GET /studios/:studioId/jobs/:id': { summary: 'One job', access: 'helper', params: StudioItemParams, response: Job },
  'POST /studios/:studioId/jobs/:id/cancel': { summary: 'Stop a job', access: 'maker', params: StudioItemParams, response: Job },
  'GET /events': {
    summary: 'News of a studio as server-sent events: `job` with its progress, `changed` with what to ask for again',
    access: 'helper', query: z.object({ studioId: Id }), produces: 'text/event-stream',
  },
});

export const serverRoutes = routes({
  'GET /health/live': { summary: 'The process answers', access: 'anyone', response: z.object({ status: z.literal('live') }) },
  'GET /health/ready': { summary: 'The database answers too; 503 where not', access: 'anyone', response: z.object({ status: z.literal('ready') }) },
  'GET /openapi.json': { summary: 'This description', access: 'anyone', response: z.record(z.string(), z.unknown()) },
});
