import type { Batch, BatchCard, BatchLine, BatchState, FitRow, FitTable, Piece, Place } from '../../server/contract/batches.ts';
import type { AlternativeKind, Plan, PlanNames, PlanRun, PlanSetup, PlanSummary, PinnedRun, SheetComparison, StockCutting, Unplaced } from '../../server/contract/plans.ts';
import { call } from './http.ts';
import type { Body, Query } from './http.ts';

export type { AlternativeKind, Batch, BatchCard, BatchLine, BatchState, FitRow, FitTable, Piece, PinnedRun, Place, Plan, PlanNames, PlanRun, PlanSetup, PlanSummary, SheetComparison, StockCutting, Unplaced };
export type BatchEdit = Omit<Body<'PATCH /studios/:studioId/batches/:id'>, 'version'>;
export type LineEdit = Omit<Body<'PATCH /studios/:studioId/batches/:id/lines/:lineId'>, 'version'>;
export type ForAll = Body<'POST /studios/:studioId/batches/:id/for-all'>;

export const listBatches = (studioId: string, query: Query<'GET /studios/:studioId/batches'>) => call('GET /studios/:studioId/batches', { params: { studioId }, query });
export const beginBatch = (studioId: string, body: Body<'POST /studios/:studioId/batches'>) => call('POST /studios/:studioId/batches', { params: { studioId }, body });
export const readBatch = (studioId: string, id: string) => call('GET /studios/:studioId/batches/:id', { params: { studioId, id } });
export const changeBatch = (studioId: string, id: string, version: number, edit: BatchEdit) => call('PATCH /studios/:studioId/batches/:id', { params: { studioId, id }, body: { ...edit, version } });
export const deleteBatch = (studioId: string, id: string) => call('DELETE /studios/:studioId/batches/:id', { params: { studioId, id } });
export const restoreBatch = (studioId: string, id: string) => call('POST /studios/:studioId/batches/:id/restore', { params: { studioId, id } });
export const copyBatch = (studioId: string, id: string, name: string) => call('POST /studios/:studioId/batches/:id/copy', { params: { studioId, id }, body: { name } });

export const addLines = (studioId: string, id: string, sentimentIds: readonly string[]) =>
  call('POST /studios/:studioId/batches/:id/lines', { params: { studioId, id }, body: { lines: sentimentIds.map((sentimentId) => ({ sentimentIds: [sentimentId] })) } });
export const changeLine = (studioId: string, id: string, line: Pick<BatchLine, 'id' | 'version'>, edit: LineEdit) =>
  call('PATCH /studios/:studioId/batches/:id/lines/:lineId', { params: { studioId, id, lineId: line.id }, body: { ...edit, version: line.version } });
export const removeLine = (studioId: string, id: string, lineId: string) => call('DELETE /studios/:studioId/batches/:id/lines/:lineId', { params: { studioId, id, lineId } });
export const spreadCards = (studioId: string, id: string) => call('POST /studios/:studioId/batches/:id/spread', { params: { studioId, id } });
export const changeAllLines = (studioId: string, id: string, body: ForAll) => call('POST /studios/:studioId/batches/:id/for-all', { params: { studioId, id }, body });
export const combineLines = (studioId: string, id: string, lineIds: readonly string[]) => call('POST /studios/:studioId/batches/:id/combine', { params: { studioId, id }, body: { lineIds: [...lineIds] } });
export const readFitTable = (studioId: string, id: string) => call('GET /studios/:studioId/batches/:id/fit-table', { params: { studioId, id } });
export const takeRecommendedDies = (studioId: string, id: string, onlyMissing: boolean) => call('POST /studios/:studioId/batches/:id/recommended-dies', { params: { studioId, id }, body: { onlyMissing } });

export const listPlans = async (studioId: string, id: string): Promise<PlanSummary[]> => (await call('GET /studios/:studioId/batches/:id/plans', { params: { studioId, id } })).items;
export const planBatch = (studioId: string, id: string, body: Body<'POST /studios/:studioId/batches/:id/plans'> = {}) => call('POST /studios/:studioId/batches/:id/plans', { params: { studioId, id }, body });
export const stopPlanning = (studioId: string, id: string) => call('POST /studios/:studioId/batches/:id/plans/stop', { params: { studioId, id } });
export const compareSheets = (studioId: string, id: string) => call('POST /studios/:studioId/batches/:id/sheet-sizes', { params: { studioId, id } });
export const readPlan = (studioId: string, id: string, planId: string) => call('GET /studios/:studioId/batches/:id/plans/:planId', { params: { studioId, id, planId } });
export const chooseAlternative = (studioId: string, id: string, planId: string, alternative: AlternativeKind) =>
  call('POST /studios/:studioId/batches/:id/plans/:planId/choose', { params: { studioId, id, planId }, body: { alternative } });
export const readStock = async (studioId: string, id: string, planId: string): Promise<StockCutting[]> => (await call('GET /studios/:studioId/batches/:id/plans/:planId/stock', { params: { studioId, id, planId } })).items;
