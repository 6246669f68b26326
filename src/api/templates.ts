import type { PageDocument } from '../../server/engine/template/types.ts';
import { addressOf, call } from './http.ts';
import type { Query } from './http.ts';

type Path = 'GET /studios/:studioId/batches/:id/plans/:planId/template-pages';
export type TemplateQuery = Query<Path>;
export interface OfPlan { studioId: string; id: string; planId: string }

export const readTemplatePages = (of: OfPlan, query: TemplateQuery): Promise<PageDocument> => call('GET /studios/:studioId/batches/:id/plans/:planId/template-pages', { params: of, query });
export const markPrinted = (of: OfPlan) => call('POST /studios/:studioId/batches/:id/plans/:planId/printed', { params: of });
export const pdfAddress = (of: OfPlan, query: TemplateQuery): string => addressOf('/studios/:studioId/batches/:id/plans/:planId/templates.pdf', { ...of }, { ...query });
export const cutLinesAddress = (of: OfPlan, run: number, sheet: number): string => addressOf('/studios/:studioId/batches/:id/plans/:planId/cut-lines.svg', { ...of }, { run, sheet });
