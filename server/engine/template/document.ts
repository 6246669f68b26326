/**
 * From a plan to paper: descriptions of pages at actual size, in mm, which the preview draws as SVG and render-pdf.ts as PDF.
 *
 * Input: an order, its plan, what is to be printed and for which printer. Output: pages whose items stand where they must be drawn for the print to be true:
 * the printer's scale and shift are taken out last. Axes: x right, y down from the paper's top left. Nothing is mutated; the same input gives the same pages. Cost:
 * the points of all outlines, once for each page that shows them. A plan that does not belong to the order, and a printer whose margins leave no room,
 * throw; missing names do not. Runs in the browser too.
 */
import type { DieGeometry } from '../fit/types.ts';
import type { RunOrder, RunPlan } from '../gangrun/types.ts';
import { lidPages, placingPages } from './bed-pages.ts';
import { diePages } from './die-pages.ts';
import { dieCheckPages, printerTestPage } from './own-pages.ts';
import { photoPage } from './photo-page.ts';
import { checkPrinter } from './printer.ts';
import { cutPlanPages, stripCutPages } from './sheet-cut-pages.ts';
import { setupContext, templateContext } from './template-context.ts';
import type { SetupContext } from './template-context.ts';
import { ticketPages } from './ticket-pages.ts';
import type { PageDescription, PageDocument, PrinterProfile, TemplateOptions, TemplatePage } from './types.ts';

export { cutFileSvg } from './cut-file.ts';
export { svgPage } from './page-svg.ts';

type SetupPage = Exclude<TemplatePage, 'sheet-cut'>;

/** In the order of work: the ticket first, then setting the stamps, then cutting. */
const IN_ORDER: SetupPage[] = ['ticket', 'placing', 'lid', 'dies-face-up', 'dies-face-down'];
const PAGES: Record<SetupPage, (context: SetupContext) => PageDescription[]> = {
  ticket: ticketPages, placing: placingPages, lid: lidPages,
  'dies-face-up': (context) => diePages(context, 'up'), 'dies-face-down': (context) => diePages(context, 'down'),
};

export function templateDocument(order: RunOrder, plan: RunPlan, options: TemplateOptions): PageDocument {
  checkPrinter(options.printer);
  const context = templateContext(order, plan, options);
  const setups = (options.setups ?? plan.setups.map((_, i) => i)).map((index) => setupContext(context, index));
  const pages = options.pages.includes('sheet-cut') && options.cutPlan ? cutPlanPages(context, options.cutPlan) : [];
  for (const setup of setups) {
    for (const page of IN_ORDER) {
      if (page === 'dies-face-up' && options.pages.includes('sheet-cut')) pages.push(...stripCutPages(setup));
      if (options.pages.includes(page)) pages.push(...PAGES[page](setup));
    }
  }
  return { title: options.title, pages };
}

export function printerTestDocument(printer: PrinterProfile, unit: 'mm' | 'in'): PageDocument {
  checkPrinter(printer);
  return { title: 'Printer test page', pages: [printerTestPage(printer, unit)] };
}

export function dieCheckDocument(dies: { name: string; geometry: DieGeometry }[], printer: PrinterProfile, unit: 'mm' | 'in'): PageDocument {
  checkPrinter(printer);
  return { title: 'Die check sheet', pages: dieCheckPages(dies, printer, unit) };
}

export function photoPageDocument(printer: PrinterProfile): PageDocument {
  checkPrinter(printer);
  return { title: 'Photo page', pages: [photoPage(printer)] };
}
