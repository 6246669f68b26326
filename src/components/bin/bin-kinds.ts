/** What the studio's bin holds, in the order of the work. A new noun with a bin is added here. */
import { cardstockCalls, inkCalls, platformCalls, printerCalls } from '../../api/gear.ts';
import type { GearCalls, GearItem, GearNoun } from '../../api/gear.ts';
import { call } from '../../api/http.ts';

export interface Binned { id: string; name: string; deletedAt: string | null }
export interface BinKind {
  title: string;
  /** As in the server's news. */
  noun: string;
  list(studioId: string): Promise<{ items: Binned[]; total: number }>;
  restore(studioId: string, id: string): Promise<unknown>;
}

/** A bin with more is rare; the list of the kind pages through the rest. */
const query = { bin: 'true' as const, sort: '-updated' as const, limit: 100 };
const gear = <I extends GearItem, N extends GearNoun>(title: string, calls: GearCalls<I, N>): BinKind => ({
  title, noun: calls.noun, list: (studioId) => calls.list(studioId, query as never), restore: (studioId, id) => calls.restore(studioId, id),
});

export const BIN_KINDS: readonly BinKind[] = [
  {
    title: 'Batches', noun: 'batches',
    list: (studioId) => call('GET /studios/:studioId/batches', { params: { studioId }, query }),
    restore: (studioId, id) => call('POST /studios/:studioId/batches/:id/restore', { params: { studioId, id } }),
  },
  {
    title: 'Stamp sets', noun: 'stamp-sets',
    list: (studioId) => call('GET /studios/:studioId/stamp-sets', { params: { studioId }, query }),
    restore: (studioId, id) => call('POST /studios/:studioId/stamp-sets/:id/restore', { params: { studioId, id } }),
  },
  {
    title: 'Die sets', noun: 'die-sets',
    list: (studioId) => call('GET /studios/:studioId/die-sets', { params: { studioId }, query }),
    restore: (studioId, id) => call('POST /studios/:studioId/die-sets/:id/restore', { params: { studioId, id } }),
  },
  gear('Platforms', platformCalls),
  gear('Printers', printerCalls),
  gear('Cardstocks', cardstockCalls),
  gear('Inks', inkCalls),
];
