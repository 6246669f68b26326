import type { Job } from '../../server/contract/jobs.ts';
import { call } from './http.ts';

export type { Job };

export const readJob = (studioId: string, id: string) => call('GET /studios/:studioId/jobs/:id', { params: { studioId, id } });
export const listJobs = async (studioId: string, subjectId?: string): Promise<Job[]> => (await call('GET /studios/:studioId/jobs', { params: { studioId }, query: { subjectId } })).items;
export const cancelJob = (studioId: string, id: string) => call('POST /studios/:studioId/jobs/:id/cancel', { params: { studioId, id } });
