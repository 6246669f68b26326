/** Numbers of a cardstock's drawing. Input mm, output px. */
import type { Grain } from '../../api/gear.ts';
import { contrastRatio } from '../../theme/contrast.ts';
import { scaleTo } from './drawing-scale.ts';
import type { Frame } from './drawing-scale.ts';

/** So many sheets make the pile one sheet thicker to the eye. */
const PILE_STEPS = [2, 20];
const PILE_PX = 3;
const FIBRE_EVERY_PX = 7;

export function drawCardstock(stock: { widthMm: number; heightMm: number; colour: string; grain: Grain; onHand: number }, frame: Frame, shared?: { widthMm: number; heightMm: number }) {
  const scale = scaleTo(frame, stock.widthMm, stock.heightMm, shared);
  const sheet = { x: scale.x(0), y: scale.y(0), w: scale.size(stock.widthMm), h: scale.size(stock.heightMm) };
  return {
    sheet,
    pile: PILE_STEPS.filter((step) => stock.onHand >= step).map((_, i) => (i + 1) * PILE_PX).reverse(),
    fibres: fibres(sheet, stock.grain),
    lineColour: contrastRatio(stock.colour, '#FFFFFF') > contrastRatio(stock.colour, '#000000') ? 'rgba(255,255,255,0.45)' : 'rgba(0,0,0,0.22)',
  };
}

/** Broken lines, each begun a little further in, as fibres lie. */
function fibres(sheet: { x: number; y: number; w: number; h: number }, grain: Grain): string {
  if (grain === 'unknown') return '';
  const across = grain === 'along-width' ? sheet.h : sheet.w, along = grain === 'along-width' ? sheet.w : sheet.h;
  const lines = Math.max(0, Math.floor(across / FIBRE_EVERY_PX) - 1);
  return Array.from({ length: lines }, (_, i) => {
    const at = (i + 1) * FIBRE_EVERY_PX, from = along * (0.08 + 0.07 * ((i * 5) % 4)), to = along * (0.92 - 0.09 * ((i * 3) % 5));
    return grain === 'along-width' ? `M${sheet.x + from} ${sheet.y + at}H${sheet.x + to}` : `M${sheet.x + at} ${sheet.y + from}V${sheet.y + to}`;
  }).join('');
}
