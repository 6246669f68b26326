/** Drawings in mm → pixels, by resvg: another renderer than the one that reads fonts for the ground truth. */
import { Resvg } from '@resvg/resvg-js';
import type { Ring } from '../../../server/engine/geometry/types.ts';

export interface Raster { width: number; height: number; rgba: Uint8Array }
export interface Painted { rings: Ring[]; fill: string; evenOdd?: boolean }

export function pathData(rings: readonly Ring[]): string {
  return rings.map((ring) => `M${ring.map((p) => `${p.x.toFixed(4)} ${p.y.toFixed(4)}`).join('L')}Z`).join('');
}

/** `paper` null leaves the ground transparent. */
export function renderSheet(widthMm: number, heightMm: number, pxPerMm: number, painted: readonly Painted[], paper: string | null): Raster {
  const width = Math.round(widthMm * pxPerMm), height = Math.round(heightMm * pxPerMm);
  const paths = painted.map((p) => `<path fill="${p.fill}" fill-rule="${p.evenOdd ? 'evenodd' : 'nonzero'}" d="${pathData(p.rings)}"/>`).join('');
  const ground = paper === null ? '' : `<rect width="${width}" height="${height}" fill="${paper}"/>`;
  const svg = `<svg xmlns="http://www.w3.org/2000/svg" width="${width}" height="${height}">${ground}<g transform="scale(${pxPerMm})">${paths}</g></svg>`;
  const image = new Resvg(svg).render();
  return { width: image.width, height: image.height, rgba: straightAlpha(new Uint8Array(image.pixels)) };
}

/** The renderer hands out colours multiplied by their alpha; picture files hold them as they are. */
function straightAlpha(rgba: Uint8Array): Uint8Array {
  for (let i = 3; i < rgba.length; i += 4) {
    const alpha = rgba[i];
    if (alpha > 0 && alpha < 255) for (let c = i - 3; c < i; c++) rgba[c] = Math.min(255, Math.round((rgba[c] * 255) / alpha));
  }
  return rgba;
}
