/** What worker threads can do, by name. Every engine door that takes longer than a moment is here. */
import type { Control } from '../engine/control.ts';
import type { CutPart } from '../engine/cutplan/types.ts';
import type { DieGeometry, FitOptions } from '../engine/fit/types.ts';
import type { RunOrder } from '../engine/gangrun/types.ts';
import type { Outline } from '../engine/geometry/types.ts';
import type { Reading, ReadOptions } from '../engine/reading/types.ts';
import type { PrinterPageRequest } from '../features/gear/printer-pages.ts';
import type { TemplateRequest } from '../features/templates/template-pdf.ts';
import type { Wishes } from '../features/stamp-sets/sentiment-follow.ts';

type Task = (input: never, control: Control) => Promise<unknown>;

const all = {
  bcryptHash: async (input: { digest: string; cost: number }) => (await import('bcryptjs')).hashSync(input.digest, input.cost),
  bcryptCompare: async (input: { digest: string; hash: string }) => (await import('bcryptjs')).compareSync(input.digest, input.hash),
  readStampSheet: async (input: { file: Uint8Array; options: ReadOptions }, control) => (await import('../engine/reading/index.ts')).readStampSheet(input.file, input.options, control),
  groupSentiments: async (input: { base: Reading; wishes: Wishes }) => (await import('../features/stamp-sets/sentiment-follow.ts')).groupSentiments(input),
  recogniseSentiments: async (input: { base: Reading; wishes: Wishes }, control) => (await import('../features/stamp-sets/recognise-sentiments.ts')).recogniseSentiments(input, control),
  pictureViews: async (input: { file: Uint8Array }) => (await import('../features/stamp-sets/picture-views.ts')).pictureViews(input),
  fitTable: async (input: { artworks: Outline[]; dies: DieGeometry[]; options?: FitOptions }) => (await import('../engine/fit/index.ts')).fitTable(input.artworks, input.dies, input.options),
  planGangRun: async (input: { order: RunOrder }, control) => (await import('../engine/gangrun/index.ts')).planGangRun(input.order, control),
  planCuts: async (input: { parts: CutPart[]; stock: { widthMm: number; heightMm: number }; options?: { trimMm?: number } }) => (await import('../engine/cutplan/index.ts')).planCuts(input.parts, input.stock, input.options),
  templatePdf: async (input: TemplateRequest) => (await import('../features/templates/template-pdf.ts')).templatePdf(input),
  templatePages: async (input: TemplateRequest) => (await import('../features/templates/template-pdf.ts')).templatePages(input),
  printerPage: async (input: PrinterPageRequest) => (await import('../features/gear/printer-pages.ts')).drawPrinterPage(input),
} satisfies Record<string, Task>;

export const tasks: Record<string, ((input: unknown, control: Control) => Promise<unknown>) | undefined> = all as never;
