import type { Bench, BenchPress, Impression, Outcome } from '../../server/contract/bench.ts';
import { call } from './http.ts';
import type { Body } from './http.ts';

export type { Bench, BenchPress, Impression, Outcome };
export type PressRecord = Body<'PUT /studios/:studioId/batches/:id/bench/presses'>;
export type ImpressionRecord = Body<'PUT /studios/:studioId/batches/:id/bench/impressions'>;
export type CutRecord = Body<'PUT /studios/:studioId/batches/:id/bench/cut-passes'>;
export type OfPress = Body<'POST /studios/:studioId/batches/:id/bench/presses/undo'>;

export const readBench = (studioId: string, id: string) => call('GET /studios/:studioId/batches/:id/bench', { params: { studioId, id } });
export const recordPress = (studioId: string, id: string, body: PressRecord, idempotencyKey: string) => call('PUT /studios/:studioId/batches/:id/bench/presses', { params: { studioId, id }, body, idempotencyKey });
export const undoPress = (studioId: string, id: string, body: OfPress) => call('POST /studios/:studioId/batches/:id/bench/presses/undo', { params: { studioId, id }, body });
export const recordImpression = (studioId: string, id: string, body: ImpressionRecord) => call('PUT /studios/:studioId/batches/:id/bench/impressions', { params: { studioId, id }, body });
export const recordCutPass = (studioId: string, id: string, body: CutRecord) => call('PUT /studios/:studioId/batches/:id/bench/cut-passes', { params: { studioId, id }, body });
export const finishBatch = (studioId: string, id: string) => call('POST /studios/:studioId/batches/:id/bench/finish', { params: { studioId, id } });
