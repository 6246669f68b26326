/** What the search of a studio looks through, in the order of the work. A new noun with a list is added here. */
import type { RouteLocationRaw } from 'vue-router';
import { cardstockCalls, inkCalls, platformCalls, printerCalls } from '../../api/gear.ts';
import { call } from '../../api/http.ts';
import type { useLength } from '../../composables/useLength.ts';

export interface Hit { id: string; title: string; about: string; to: RouteLocationRaw }
export interface SearchKind {
  title: string;
  /** As in the server's news, so that results renew themselves. */
  noun: string;
  /** Route of the whole list, which takes the same words. */
  list: string;
  find(studioId: string, search: string, length: Pick<ReturnType<typeof useLength>, 'show' | 'showSize'>): Promise<{ hits: Hit[]; total: number }>;
}

/** Enough to see whether it is there; the list shows the rest. */
const FEW = 6;

export const SEARCH_KINDS: readonly SearchKind[] = [
  {
    title: 'Batches', noun: 'batches', list: 'batches',
    find: async (studioId, search) => {
      const { items, total } = await call('GET /studios/:studioId/batches', { params: { studioId }, query: { search, limit: FEW } });
      return { total, hits: items.map((batch) => ({ id: batch.id, title: batch.name, about: `${batch.cards.toLocaleString()} cards`, to: { name: 'batch', params: { studioId, batchId: batch.id } } })) };
    },
  },
  {
    title: 'Stamp sets', noun: 'stamp-sets', list: 'stamp-sets',
    find: async (studioId, search) => {
      const { items, total } = await call('GET /studios/:studioId/stamp-sets', { params: { studioId }, query: { search, limit: FEW } });
      return { total, hits: items.map((set) => ({ id: set.id, title: set.name, about: set.sentiments === 1 ? '1 sentiment' : `${set.sentiments} sentiments`, to: { name: 'stamp-set', params: { studioId, stampSetId: set.id } } })) };
    },
  },
  {
    title: 'Sentiments', noun: 'stamp-sets', list: 'stamp-sets',
    find: async (studioId, search, length) => {
      const { items, total } = await call('GET /studios/:studioId/sentiments', { params: { studioId }, query: { search, limit: FEW } });
      return {
        total,
        hits: items.map((s) => ({ id: s.id, title: s.title, about: [s.widthMm !== null && s.heightMm !== null ? length.showSize(s.widthMm, s.heightMm) : 'no size yet', s.stampSetName].join(' · '), to: { name: 'stamp-set', params: { studioId, stampSetId: s.stampSetId } } })),
      };
    },
  },
  {
    title: 'Die sets', noun: 'die-sets', list: 'dies',
    find: async (studioId, search) => {
      const { items, total } = await call('GET /studios/:studioId/die-sets', { params: { studioId }, query: { search, limit: FEW } });
      return { total, hits: items.map((set) => ({ id: set.id, title: set.name, about: set.dies.length === 1 ? '1 die' : `${set.dies.length} dies`, to: { name: 'die-set', params: { studioId, dieSetId: set.id } } })) };
    },
  },
  {
    title: 'Platforms', noun: 'platforms', list: 'platforms',
    find: async (studioId, search, length) => {
      const { items, total } = await platformCalls.list(studioId, { search, limit: FEW });
      return { total, hits: items.map((p) => ({ id: p.id, title: p.name, about: length.showSize(p.widthMm, p.heightMm), to: { name: 'platform', params: { studioId, id: p.id } } })) };
    },
  },
  {
    title: 'Printers', noun: 'printers', list: 'printers',
    find: async (studioId, search, length) => {
      const { items, total } = await printerCalls.list(studioId, { search, limit: FEW });
      return { total, hits: items.map((p) => ({ id: p.id, title: p.name, about: length.showSize(p.paper.widthMm, p.paper.heightMm), to: { name: 'printer', params: { studioId, id: p.id } } })) };
    },
  },
  {
    title: 'Cardstocks', noun: 'cardstocks', list: 'cardstocks',
    find: async (studioId, search, length) => {
      const { items, total } = await cardstockCalls.list(studioId, { search, limit: FEW });
      return { total, hits: items.map((c) => ({ id: c.id, title: c.name, about: `${length.showSize(c.widthMm, c.heightMm)} · ${c.onHand.toLocaleString()} on hand`, to: { name: 'cardstock', params: { studioId, id: c.id } } })) };
    },
  },
  {
    title: 'Inks', noun: 'inks', list: 'inks',
    find: async (studioId, search) => {
      const { items, total } = await inkCalls.list(studioId, { search, limit: FEW });
      return { total, hits: items.map((ink) => ({ id: ink.id, title: ink.name, about: ink.kind, to: { name: 'ink', params: { studioId, id: ink.id } } })) };
    },
  },
];
