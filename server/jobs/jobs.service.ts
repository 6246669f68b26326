/** Queued work as people see it. */
import type { Job } from '../contract/jobs.ts';
import { notFound } from '../errors/app-error.ts';
import type { Deps } from '../feature.ts';
import { findJob, listJobs } from './jobs.queries.ts';
import type { JobRow } from './jobs.queries.ts';

export function createJobsService({ db, jobs }: Pick<Deps, 'db' | 'jobs'>) {
  async function find(studioId: string, id: string): Promise<Job> {
    const job = await findJob(db, id, studioId);
    if (!job) throw notFound('This job');
    return toAnswer(job);
  }
  return {
    find,
    list: async (studioId: string, subjectId?: string): Promise<Job[]> => (await listJobs(db, studioId, subjectId)).map(toAnswer),
    /** A job that has ended meanwhile stays as it is. */
    async cancel(studioId: string, id: string): Promise<Job> {
      await find(studioId, id);
      await jobs.cancel(id);
      return find(studioId, id);
    },
  };
}

/** Without what was asked for: payloads may name files. */
function toAnswer({ id, studioId, kind, subjectId, state, progress, stage, result, error, createdAt }: JobRow): Job {
  return { id, studioId, kind, subjectId, state, progress, stage, result, error, createdAt };
}
