/** News through PostgreSQL's NOTIFY: it leaves with the commit, and reaches every server process. */
import type { Knex } from 'knex';
import type { DbSession } from '../db/session.ts';
import type { Events, StudioEvent } from './types.ts';

const CHANNEL = 'inkmuster_events';

export async function createEvents(session: DbSession): Promise<Events> {
  const listeners = new Map<string, Set<(event: StudioEvent) => void>>();
  const gaps = new Set<() => void>();
  session.onLost(() => gaps.forEach((onGap) => onGap()));
  await session.listen(CHANNEL, (payload) => {
    const { studioId, event } = JSON.parse(payload) as { studioId: string; event: StudioEvent };
    listeners.get(studioId)?.forEach((listener) => listener(event));
  });
  return {
    async publish(db: Knex, studioId, event) {
      // Within a transaction the database keeps it until the commit and drops it on a rollback.
      await db.raw('SELECT pg_notify(?, ?)', [CHANNEL, JSON.stringify({ studioId, event })]);
    },
    subscribe(studioId, listener, onGap) {
      const set = listeners.get(studioId) ?? new Set();
      listeners.set(studioId, set.add(listener));
      if (onGap) gaps.add(onGap);
      return () => {
        if (onGap) gaps.delete(onGap);
        set.delete(listener);
        if (set.size === 0) listeners.delete(studioId);
      };
    },
  };
}
