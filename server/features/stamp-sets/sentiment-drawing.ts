/** A sentiment's outline as an SVG file, true to proportion: for lists, tables and other pages' pictures. */
import { outlineBox } from '../../engine/geometry/ring.ts';
import type { Outline } from '../../engine/geometry/types.ts';

/** Air around the ink, as a share of the longer side, so that a stroke at the edge is not cut. */
const AIR = 0.02;
/** The ink colour of the pages; a picture in a page takes no style from it. */
const INK = '#22304A';

export function sentimentDrawing(artwork: Outline, outlined: boolean): string {
  const { w, h } = outlineBox(artwork);
  const air = AIR * Math.max(w, h);
  const figure = (value: number) => String(Math.round(value * 100) / 100);
  const path = artwork.rings.map((ring) => `M${ring.map(({ x, y }) => `${figure(x)} ${figure(y)}`).join('L')}Z`).join('');
  const box = [-air, -air, w + 2 * air, h + 2 * air].map(figure).join(' ');
  // A typed size is only a frame: it is drawn as one, so that nobody takes it for ink.
  const paint = outlined ? `fill="${INK}" fill-rule="evenodd"` : `fill="none" stroke="${INK}" stroke-dasharray="3 2" stroke-width="1" vector-effect="non-scaling-stroke"`;
  return `<svg xmlns="http://www.w3.org/2000/svg" viewBox="${box}" width="${figure(w + 2 * air)}mm" height="${figure(h + 2 * air)}mm"><path d="${path}" ${paint}/></svg>`;
}
