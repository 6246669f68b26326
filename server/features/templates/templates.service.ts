/** Which pages of a plan are printed, and for which printer. The pages themselves are the engine's. */
import type { z } from 'zod';
import type { Printer } from '../../contract/gear.ts';
import type { TemplateQuery } from '../../contract/templates.ts';
import { cutFileSvg } from '../../engine/template/index.ts';
import type { PageDocument, PrinterProfile, TemplateLabels } from '../../engine/template/index.ts';
import { conflict, notFound } from '../../errors/app-error.ts';
import type { Deps } from '../../feature.ts';
import { advanceBatch, lockBatch } from '../batches/batches.queries.ts';
import { markPlanUsed, planForPrinting } from '../batches/plans.queries.ts';
import type { PlanForPrinting } from '../batches/plans.queries.ts';
import { printers } from '../gear/gear-kinds.ts';
import { gearByIds } from '../gear/gear.queries.ts';
import type { TemplateRequest } from './template-pdf.ts';

interface At { studioId: string; id: string; planId: string }
type Query = z.output<typeof TemplateQuery>;

/** Of most home printers, mm; used until a printer is entered. */
const USUAL_MARGINS = { left: 6, right: 6, top: 6, bottom: 13 };
const PAPER = { mm: { widthMm: 210, heightMm: 297 }, in: { widthMm: 215.9, heightMm: 279.4 } };

export function createTemplateService({ db, engine, events }: Pick<Deps, 'db' | 'engine' | 'events'>) {
  async function plan(at: At): Promise<PlanForPrinting> {
    const found = await planForPrinting(db, at.studioId, at.planId);
    if (!found || found.plan.batchId !== at.id) throw conflict('plan-replaced', 'This plan was replaced by another in the meantime. Load the page again.');
    return found;
  }

  async function profile(studioId: string, printerId: string | null, unit: 'mm' | 'in'): Promise<PrinterProfile> {
    const [printer] = printerId === null ? [] : await gearByIds(db, printers, studioId, [printerId]);
    if (printerId !== null && !printer) throw notFound('This printer');
    if (!printer) return { paper: PAPER[unit], unprintable: USUAL_MARGINS, scale: { x: 1, y: 1 }, shift: { x: 0, y: 0 } };
    const { paper, unprintable, scale, shift, name } = printer as Printer;
    return { paper, unprintable, scale, shift, name };
  }

  async function request(at: At, query: Query, origin: string): Promise<TemplateRequest> {
    const { plan: whole, batch, cardstocks } = await plan(at);
    const printer = await profile(at.studioId, query.printer ?? batch.printerId, query.unit);
    const benchUrl = `${origin}/s/${at.studioId}/batches/${at.id}/bench?setup={setup}`;
    let first = 1;
    const parts = whole.runs.flatMap((run) => {
      const numbers = run.plan.setups.map((_, i) => first + i);
      const firstSetupNumber = first;
      first += numbers.length;
      const setups = numbers.flatMap((number, i) => (!query.setups || query.setups.includes(number) ? [i] : []));
      if (setups.length === 0) return [];
      const inks = Object.fromEntries(Object.entries(run.names.inks).map(([id, ink]) => [id, { ...ink, kind: ink.kind ?? undefined }]));
      const labels: TemplateLabels = { ...run.names, inks, batchName: batch.name, cardstockName: run.cardstockId ? cardstocks[run.cardstockId]?.name : undefined, benchUrl, firstSetupNumber };
      return [{ order: run.order, plan: run.plan, options: { pages: query.pages, printer, unit: query.unit, title: batch.name, setups, labels } }];
    });
    if (parts.length === 0) throw conflict('nothing-to-print', 'This plan has no setup to print: none of its labels could be placed.');
    return { title: batch.name, parts };
  }

  return {
    async pdf(at: At, query: Query, origin: string): Promise<{ bytes: Uint8Array; name: string }> {
      const made = await request(at, query, origin);
      return { bytes: await engine.run<Uint8Array>('templatePdf', made), name: `${made.title}.pdf` };
    },

    pages: async (at: At, query: Query, origin: string): Promise<PageDocument> => engine.run<PageDocument>('templatePages', await request(at, query, origin)),

    async cutLines(at: At, runNumber: number, sheet: number): Promise<{ svg: string; name: string }> {
      const { plan: whole, batch } = await plan(at);
      const run = whole.runs[runNumber - 1];
      if (!run || !run.plan.setups.some((setup) => setup.presses.some((press) => press.sheet === sheet))) throw notFound('This sheet');
      return { svg: cutFileSvg(run.order, run.plan, sheet, { title: `${batch.name}, sheet ${sheet}`, labels: { dies: run.names.dies } }), name: `${batch.name} sheet ${sheet}.svg` };
    },

    async printed(at: At): Promise<void> {
      await db.transaction(async (tx) => {
        if (!(await lockBatch(tx, at.studioId, at.id))) throw notFound('This batch');
        if (!(await markPlanUsed(tx, at.studioId, at.planId))) throw conflict('plan-replaced', 'This plan was replaced by another in the meantime. Load the page again.');
        await advanceBatch(tx, at.studioId, at.id, 'printed');
        await events.publish(tx, at.studioId, { type: 'changed', noun: 'batches', id: at.id });
      });
    },
  };
}
