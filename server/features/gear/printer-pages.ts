/** Pages printed once for a printer, drawn in a worker thread. */
import type { Unit } from '../../contract/account.ts';
import type { Printer } from '../../contract/gear.ts';
import { photoPageDocument, printerTestDocument, renderPdf } from '../../engine/template/index.ts';

export interface PrinterPageRequest { page: 'test' | 'photo'; printer: Pick<Printer, 'paper' | 'unprintable' | 'scale' | 'shift'>; unit: Unit }

export function drawPrinterPage({ page, printer: { paper, unprintable, scale, shift }, unit }: PrinterPageRequest): Promise<Uint8Array> {
  const profile = { paper, unprintable, scale, shift };
  return renderPdf(page === 'test' ? printerTestDocument(profile, unit) : photoPageDocument(profile));
}
