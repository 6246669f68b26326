/** Paper's stand-in: a PDF drawn by poppler at 600 dpi, and how far a line drawn in it is from where it should be. */
import { execFileSync, spawnSync } from 'node:child_process';
import { mkdtempSync, readdirSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import type { Point, Ring } from '../../server/engine/geometry/types.ts';
import type { PrinterProfile } from '../../server/engine/template/types.ts';

export const DPI = 600;
const PX_PER_MM = DPI / 25.4;
/** A line is looked for this far to both sides. */
const REACH_MM = 0.45;

export interface Raster { width: number; height: number; grey: Uint8Array }

function inFolder<T>(pdf: Uint8Array, use: (file: string, folder: string) => T): T {
  const folder = mkdtempSync(join(tmpdir(), 'template-'));
  try {
    const file = join(folder, 'page.pdf');
    writeFileSync(file, pdf);
    return use(file, folder);
  } finally {
    rmSync(folder, { recursive: true });
  }
}

/** All pages; poppler's warnings, which it writes to its error output, make the test fail. */
export function rasterise(pdf: Uint8Array, dpi = DPI): Raster[] {
  return inFolder(pdf, (file, folder) => {
    const { stderr, status } = spawnSync('pdftoppm', ['-r', String(dpi), '-gray', file, join(folder, 'p')], { encoding: 'utf8' });
    if (status !== 0 || stderr !== '') throw new Error(`poppler: ${stderr}`);
    return readdirSync(folder).filter((name) => name.endsWith('.pgm')).sort().map((name) => readPgm(readFileSync(join(folder, name))));
  });
}

export function wordsOf(pdf: Uint8Array): string[] {
  return inFolder(pdf, (file) => execFileSync('pdftotext', ['-layout', file, '-'], { encoding: 'utf8' })).split('\f').slice(0, -1);
}

function readPgm(bytes: Buffer): Raster {
  const head = /^P5\s+(\d+)\s+(\d+)\s+255\s/.exec(bytes.subarray(0, 64).toString('latin1'));
  if (!head) throw new Error('Not a grey picture.');
  const start = head[0].length;
  return { width: Number(head[1]), height: Number(head[2]), grey: bytes.subarray(start) };
}

/** Where the page must show a wanted point: the printer moves and scales what is drawn. */
export function drawnAt(p: Point, { scale, shift }: PrinterProfile): Point {
  return { x: (p.x - shift.x) / scale.x, y: (p.y - shift.y) / scale.y };
}

/** 0 white to 255 black, between pixels by the nearest. */
export function darkness({ width, height, grey }: Raster, p: Point): number {
  const x = Math.floor(p.x * PX_PER_MM), y = Math.floor(p.y * PX_PER_MM);
  return x < 0 || y < 0 || x >= width || y >= height ? 0 : 255 - grey[y * width + x];
}

/** Signed distance from `at` to the middle of the darkest line across `normal`; null where there is none. */
export function lineOffset(raster: Raster, at: Point, normal: Point): number | null {
  const step = 0.25 / PX_PER_MM, count = Math.ceil(REACH_MM / step);
  let darkest = 0;
  const profile: number[] = [];
  for (let i = -count; i <= count; i++) {
    const d = darkness(raster, { x: at.x + normal.x * i * step, y: at.y + normal.y * i * step });
    profile.push(d);
    darkest = Math.max(darkest, d);
  }
  if (darkest < 60) return null;
  // Of several dark runs the nearest.
  let best = Infinity;
  for (let i = 0; i < profile.length; i++) {
    if (profile[i] < darkest * 0.75) continue;
    let k = i;
    while (k + 1 < profile.length && profile[k + 1] >= darkest * 0.75) k++;
    const middle = ((i + k) / 2 - count) * step;
    if (Math.abs(middle) < Math.abs(best)) best = middle;
    i = k;
  }
  return best;
}

export interface Measured { samples: number; /** Share of samples further than 0.1 mm from a line. */ off: number; /** Mean distance of the others. */ meanMm: number }

/** Along closed rings (wanted places), one sample in the middle of every stretch of about `everyMm`. Lines that cross by chance cost a few samples. */
export function measureRings(raster: Raster, rings: readonly Ring[], printer: PrinterProfile, everyMm = 1.5): Measured {
  let samples = 0, off = 0, sum = 0;
  for (const ring of rings) {
    for (let i = 0; i < ring.length; i++) {
      const a = ring[i], b = ring[(i + 1) % ring.length];
      const length = Math.hypot(b.x - a.x, b.y - a.y);
      if (length < 0.05) continue;
      const pieces = Math.max(1, Math.round(length / everyMm));
      const normal = { x: -(b.y - a.y) / length, y: (b.x - a.x) / length };
      for (let k = 0; k < pieces; k++) {
        const t = (k + 0.5) / pieces;
        const offset = lineOffset(raster, drawnAt({ x: a.x + (b.x - a.x) * t, y: a.y + (b.y - a.y) * t }, printer), normal);
        samples++;
        if (offset === null || Math.abs(offset) > 0.1) off++;
        else sum += Math.abs(offset);
      }
    }
  }
  return { samples, off: off / samples, meanMm: sum / Math.max(1, samples - off) };
}
