import type { Unit } from '../../server/contract/account.ts';
import type { Cardstock, Corner, Grain, Ink, InkKind, Platform, Printer, Side } from '../../server/contract/gear.ts';
import { addressOf, call } from './http.ts';
import type { Body, Query } from './http.ts';

export type { Cardstock, Corner, Grain, Ink, InkKind, Platform, Printer, Side };
export type GearNoun = 'platforms' | 'printers' | 'cardstocks' | 'inks';
export type GearItem = Platform | Printer | Cardstock | Ink;
export type GearPage<I> = { items: I[]; next: string | null; total: number };

/** What can be asked and done with gear of one kind; pages of all kinds are made of these. */
export interface GearCalls<I, N extends GearNoun = GearNoun> {
  noun: N;
  list(studioId: string, query: Query<`GET /studios/:studioId/${N}`>): Promise<GearPage<I>>;
  read(studioId: string, id: string): Promise<I>;
  add(studioId: string, body: Body<`POST /studios/:studioId/${N}`>): Promise<I>;
  change(studioId: string, id: string, body: Body<`PATCH /studios/:studioId/${N}/:id`>): Promise<I>;
  remove(studioId: string, id: string): Promise<unknown>;
  restore(studioId: string, id: string): Promise<I>;
}

export const platformCalls: GearCalls<Platform, 'platforms'> = {
  noun: 'platforms',
  list: (studioId, query) => call('GET /studios/:studioId/platforms', { params: { studioId }, query }),
  read: (studioId, id) => call('GET /studios/:studioId/platforms/:id', { params: { studioId, id } }),
  add: (studioId, body) => call('POST /studios/:studioId/platforms', { params: { studioId }, body }),
  change: (studioId, id, body) => call('PATCH /studios/:studioId/platforms/:id', { params: { studioId, id }, body }),
  remove: (studioId, id) => call('DELETE /studios/:studioId/platforms/:id', { params: { studioId, id } }),
  restore: (studioId, id) => call('POST /studios/:studioId/platforms/:id/restore', { params: { studioId, id } }),
};

export const printerCalls: GearCalls<Printer, 'printers'> = {
  noun: 'printers',
  list: (studioId, query) => call('GET /studios/:studioId/printers', { params: { studioId }, query }),
  read: (studioId, id) => call('GET /studios/:studioId/printers/:id', { params: { studioId, id } }),
  add: (studioId, body) => call('POST /studios/:studioId/printers', { params: { studioId }, body }),
  change: (studioId, id, body) => call('PATCH /studios/:studioId/printers/:id', { params: { studioId, id }, body }),
  remove: (studioId, id) => call('DELETE /studios/:studioId/printers/:id', { params: { studioId, id } }),
  restore: (studioId, id) => call('POST /studios/:studioId/printers/:id/restore', { params: { studioId, id } }),
};

export const cardstockCalls: GearCalls<Cardstock, 'cardstocks'> = {
  noun: 'cardstocks',
  list: (studioId, query) => call('GET /studios/:studioId/cardstocks', { params: { studioId }, query }),
  read: (studioId, id) => call('GET /studios/:studioId/cardstocks/:id', { params: { studioId, id } }),
  add: (studioId, body) => call('POST /studios/:studioId/cardstocks', { params: { studioId }, body }),
  change: (studioId, id, body) => call('PATCH /studios/:studioId/cardstocks/:id', { params: { studioId, id }, body }),
  remove: (studioId, id) => call('DELETE /studios/:studioId/cardstocks/:id', { params: { studioId, id } }),
  restore: (studioId, id) => call('POST /studios/:studioId/cardstocks/:id/restore', { params: { studioId, id } }),
};

export const inkCalls: GearCalls<Ink, 'inks'> = {
  noun: 'inks',
  list: (studioId, query) => call('GET /studios/:studioId/inks', { params: { studioId }, query }),
  read: (studioId, id) => call('GET /studios/:studioId/inks/:id', { params: { studioId, id } }),
  add: (studioId, body) => call('POST /studios/:studioId/inks', { params: { studioId }, body }),
  change: (studioId, id, body) => call('PATCH /studios/:studioId/inks/:id', { params: { studioId, id }, body }),
  remove: (studioId, id) => call('DELETE /studios/:studioId/inks/:id', { params: { studioId, id } }),
  restore: (studioId, id) => call('POST /studios/:studioId/inks/:id/restore', { params: { studioId, id } }),
};

/** All of one kind, for choosing among them; a studio with more than 200 inks chooses among the first by name. */
export async function allGear<I, N extends GearNoun>(calls: GearCalls<I, N>, studioId: string): Promise<I[]> {
  return (await calls.list(studioId, { sort: 'name', limit: 200 } as Query<`GET /studios/:studioId/${N}`>)).items;
}

/** Of a PDF to print once. */
export const printerPageAddress = (studioId: string, id: string, page: 'test' | 'photo', unit: Unit) => addressOf('/studios/:studioId/printers/:id/pages/:page', { studioId, id, page }, { unit });
