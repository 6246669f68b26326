import type { Die, DieSet } from '../../server/contract/dies.ts';
import { call } from './http.ts';
import type { Answer, Body, Query } from './http.ts';

export type { Die, DieSet };
export type DieSetList = Answer<'GET /studios/:studioId/die-sets'>;
export type NewDie = Body<'POST /studios/:studioId/die-sets/:id/dies'>['dies'][number];
export type DieChange = Omit<Body<'PATCH /studios/:studioId/dies/:id'>, 'version'>;

export const listDieSets = (studioId: string, query: Query<'GET /studios/:studioId/die-sets'>) => call('GET /studios/:studioId/die-sets', { params: { studioId }, query });
export const readDieSet = (studioId: string, id: string) => call('GET /studios/:studioId/die-sets/:id', { params: { studioId, id } });
export const addDieSet = (studioId: string, body: Body<'POST /studios/:studioId/die-sets'>) => call('POST /studios/:studioId/die-sets', { params: { studioId }, body });
export const changeDieSet = (studioId: string, id: string, body: Body<'PATCH /studios/:studioId/die-sets/:id'>) => call('PATCH /studios/:studioId/die-sets/:id', { params: { studioId, id }, body });
export const deleteDieSet = (studioId: string, id: string) => call('DELETE /studios/:studioId/die-sets/:id', { params: { studioId, id } });
export const restoreDieSet = (studioId: string, id: string) => call('POST /studios/:studioId/die-sets/:id/restore', { params: { studioId, id } });
export const addDies = (studioId: string, id: string, dies: NewDie[]) => call('POST /studios/:studioId/die-sets/:id/dies', { params: { studioId, id }, body: { dies } });

export const listDies = (studioId: string) => call('GET /studios/:studioId/dies', { params: { studioId } });
export const changeDie = (studioId: string, id: string, version: number, change: DieChange) => call('PATCH /studios/:studioId/dies/:id', { params: { studioId, id }, body: { ...change, version } });
export const deleteDie = (studioId: string, id: string) => call('DELETE /studios/:studioId/dies/:id', { params: { studioId, id } });
export const restoreDie = (studioId: string, id: string) => call('POST /studios/:studioId/dies/:id/restore', { params: { studioId, id } });

export type FitMaterial = Answer<'GET /studios/:studioId/fit-table'>;
export const readFitMaterial = (studioId: string, query: Query<'GET /studios/:studioId/fit-table'>) => call('GET /studios/:studioId/fit-table', { params: { studioId }, query });
