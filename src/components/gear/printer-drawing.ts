/** Numbers of a printer's drawing. Input mm, output px. */
import type { Printer } from '../../api/gear.ts';
import { scaleTo } from './drawing-scale.ts';
import type { Frame } from './drawing-scale.ts';

/** A shift of a millimetre would not be seen at true size: the cross's miss is drawn this many times larger. */
const MISS_TIMES = 8;
const CROSS_MM = 12;

export function drawPrinter({ paper, unprintable: u, scale: s, shift }: Pick<Printer, 'paper' | 'unprintable' | 'scale' | 'shift'>, frame: Frame, shared?: { widthMm: number; heightMm: number }) {
  const scale = scaleTo(frame, paper.widthMm, paper.heightMm, shared);
  const box = (x: number, y: number, w: number, h: number) => ({ x: scale.x(x), y: scale.y(y), w: scale.size(Math.max(0, w)), h: scale.size(Math.max(0, h)) });
  const outer = box(0, 0, paper.widthMm, paper.heightMm);
  const inside = box(u.left, u.top, paper.widthMm - u.left - u.right, paper.heightMm - u.top - u.bottom);
  const rect = (b: typeof outer) => `M${b.x} ${b.y}h${b.w}v${b.h}h${-b.w}z`;
  const centre = { x: paper.widthMm / 2, y: paper.heightMm / 2 };
  // Where the cross in the middle lands: scale · drawn + shift, less where it was sent.
  const miss = { x: centre.x * (s.x - 1) + shift.x, y: centre.y * (s.y - 1) + shift.y };
  const cross = (x: number, y: number) => `M${scale.x(x - CROSS_MM)} ${scale.y(y)}H${scale.x(x + CROSS_MM)}M${scale.x(x)} ${scale.y(y - CROSS_MM)}V${scale.y(y + CROSS_MM)}`;
  return { paper: outer, inside, edges: rect(outer) + rect(inside), cross: cross(centre.x, centre.y), landed: cross(centre.x + miss.x * MISS_TIMES, centre.y + miss.y * MISS_TIMES), missMm: Math.hypot(miss.x, miss.y) };
}
