/** Templates of a whole plan in a worker thread: its runs one after the other in one document. */
import { renderPdf, templateDocument } from '../../engine/template/index.ts';
import type { PageDocument, TemplateOptions } from '../../engine/template/index.ts';
import type { RunOrder, RunPlan } from '../../engine/gangrun/types.ts';

export interface TemplateRequest { title: string; parts: { order: RunOrder; plan: RunPlan; options: TemplateOptions }[] }

export function templatePages({ title, parts }: TemplateRequest): PageDocument {
  return { title, pages: parts.flatMap(({ order, plan, options }) => templateDocument(order, plan, options).pages) };
}

export function templatePdf(request: TemplateRequest): Promise<Uint8Array> {
  return renderPdf(templatePages(request));
}
