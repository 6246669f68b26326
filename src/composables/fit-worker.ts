/** Fits sentiments into dies off the page's thread, a few rows at a time; the kernel is the server's own. */
import { fitTable } from '../../server/engine/fit/best-fit.ts';
import type { DieGeometry, Fit, FitOptions } from '../../server/engine/fit/types.ts';
import type { Outline } from '../../server/engine/geometry/types.ts';

export interface FitRequest { artworks: Outline[]; dies: DieGeometry[]; options: FitOptions }
export interface FitRowsAnswer { from: number; rows: Fit[][] }

/** Few enough that the first rows are there at once, enough that preparing the dies anew costs little. */
const ROWS_AT_ONCE = 8;

self.onmessage = ({ data: { artworks, dies, options } }: MessageEvent<FitRequest>) => {
  for (let from = 0; from < artworks.length; from += ROWS_AT_ONCE) {
    self.postMessage({ from, rows: fitTable(artworks.slice(from, from + ROWS_AT_ONCE), dies, options) } satisfies FitRowsAnswer);
  }
};
