/** Doors of the templates: a plan → pages in mm → PDF. The browser imports document.ts instead. */
export { cutFileSvg, dieCheckDocument, photoPageDocument, printerTestDocument, svgPage, templateDocument } from './document.ts';
export { renderPdf } from './render-pdf.ts';
export type { PageDescription, PageDocument, PageItem, PagePath, PageRole, PageText, PrinterProfile, TemplateLabels, TemplateOptions, TemplatePage } from './types.ts';
