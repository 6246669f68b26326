/** Shapes that come with words on stamps: hearts, stars, rules, flourishes, rows of dots, frames. Millimetres, as closed rings, filled even-odd. */
import type { Point, Ring } from '../../../server/engine/geometry/types.ts';

const TURN = 2 * Math.PI;

export function heart(widthMm: number): Ring {
  const s = widthMm / 32;
  return Array.from({ length: 60 }, (_, i) => {
    const t = (i / 60) * TURN;
    return { x: s * 16 * Math.sin(t) ** 3, y: -s * (13 * Math.cos(t) - 5 * Math.cos(2 * t) - 2 * Math.cos(3 * t) - Math.cos(4 * t)) };
  });
}

export function star(radiusMm: number): Ring {
  return Array.from({ length: 10 }, (_, i) => polar(i % 2 === 0 ? radiusMm : radiusMm * 0.42, (i / 10) * TURN - TURN / 4));
}

export function disc(radiusMm: number, at: Point = { x: 0, y: 0 }): Ring {
  return Array.from({ length: 32 }, (_, i) => { const p = polar(radiusMm, (i / 32) * TURN); return { x: p.x + at.x, y: p.y + at.y }; });
}

export function rule(lengthMm: number, thickMm: number): Ring {
  return box(0, 0, lengthMm, thickMm);
}

/** A wave drawn with a nib. */
export function flourish(lengthMm: number, thickMm: number): Ring {
  const n = 60, at = (i: number, side: number): Point => {
    const t = i / n;
    return { x: t * lengthMm, y: Math.sin(t * TURN) * lengthMm * 0.06 + side * thickMm * (0.3 + Math.sin(Math.PI * t) * 0.5) };
  };
  return [...Array.from({ length: n + 1 }, (_, i) => at(i, -1)), ...Array.from({ length: n + 1 }, (_, i) => at(n - i, 1))];
}

export function dots(count: number, pitchMm: number, radiusMm: number): Ring[] {
  return Array.from({ length: count }, (_, i) => disc(radiusMm, { x: i * pitchMm, y: 0 }));
}

/** Edge of a frame round a box: outer and inner ring. */
export function frame(widthMm: number, heightMm: number, thickMm: number): Ring[] {
  return [box(0, 0, widthMm, heightMm), box(thickMm, thickMm, widthMm - thickMm, heightMm - thickMm)];
}

function box(x0: number, y0: number, x1: number, y1: number): Ring {
  return [{ x: x0, y: y0 }, { x: x1, y: y0 }, { x: x1, y: y1 }, { x: x0, y: y1 }];
}

function polar(radius: number, angle: number): Point {
  return { x: radius * Math.cos(angle), y: radius * Math.sin(angle) };
}
