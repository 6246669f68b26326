/** News for the people of a studio, sent over server-sent events to every server process's clients. */
import type { Knex } from 'knex';
import type { JobStatus } from '../jobs/types.ts';

export type StudioEvent =
  | { type: 'job'; job: Omit<JobStatus, 'result'> }
  /** Rows changed: which noun (`stamp-sets`, `batches`, `bench` …) and which id, so that open pages ask again. */
  | { type: 'changed'; noun: string; id: string };

export interface Events {
  /** Told when the given transaction commits; never when it rolls back. */
  publish(db: Knex, studioId: string, event: StudioEvent): Promise<void>;
  /** `onGap`: news may have been missed, since the database was away; whoever shows something asks for it again. */
  subscribe(studioId: string, listener: (event: StudioEvent) => void, onGap?: () => void): () => void;
}
