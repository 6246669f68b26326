/** What is printed of a plan: pages at true size for one printer, as PDF and as descriptions for the preview; cut lines for cutting machines. */
import { z } from 'zod';
import type { PageDocument } from '../engine/template/types.ts';
import { routes } from './route.ts';
import { Id } from './shared.ts';

export const TEMPLATE_PAGES = ['placing', 'lid', 'dies-face-up', 'dies-face-down', 'sheet-cut', 'ticket'] as const;
export const TemplatePage = z.enum(TEMPLATE_PAGES);

const listed = z.string().max(400).transform((text) => text.split(',').filter((part) => part !== ''));

export const TemplateQuery = z.object({
  /** Kinds of pages, separated by commas; default all but the lid sheet and dies face down. */
  pages: listed.pipe(z.array(TemplatePage).min(1, 'Choose at least one kind of page.')).default(['placing', 'dies-face-up', 'ticket']),
  /** Default the batch's printer; none: common margins of A4 or Letter, uncorrected. */
  printer: Id.optional(),
  unit: z.enum(['mm', 'in']).default('mm'),
  /** Numbers of setups through the plan, separated by commas; default all. */
  setups: listed.pipe(z.array(z.coerce.number<string>().int().min(1).max(200)).min(1, 'Choose at least one setup.').max(60)).optional(),
});
const PlanParams = z.object({ studioId: Id, id: Id, planId: Id });

export const templateRoutes = routes({
  'GET /studios/:studioId/batches/:id/plans/:planId/templates.pdf': {
    summary: 'Templates and run tickets at true size', access: 'helper', costly: true, params: PlanParams, query: TemplateQuery, produces: 'application/pdf',
  },
  'GET /studios/:studioId/batches/:id/plans/:planId/template-pages': {
    summary: 'The same pages as descriptions in mm, for a preview', access: 'helper', costly: true, params: PlanParams, query: TemplateQuery, response: z.custom<PageDocument>(),
  },
  'GET /studios/:studioId/batches/:id/plans/:planId/cut-lines.svg': {
    summary: 'Cut lines of a sheet at true size, one group a die', access: 'helper', params: PlanParams, query: z.object({ run: z.coerce.number().int().min(1).max(20).default(1), sheet: z.coerce.number().int().min(1).max(10_000) }), produces: 'image/svg+xml',
  },
  'POST /studios/:studioId/batches/:id/plans/:planId/printed': { summary: 'The plan has been printed: from now on it stays as it is', access: 'helper', params: PlanParams },
});
