/** Changes of a layout. Pure: every function answers a new one, so that undo is a matter of keeping the old. Bed coordinates, mm. */
import type { Placement, Setup } from '../../server/engine/gangrun/types.ts';

export interface Layout { setups: Pick<Setup, 'turns' | 'placements'>[] }
type OneSetup = Layout['setups'][number];

/** Rounding of what keys and drags add up to: a hundredth of what a person can set. */
const ROUND = 1e4;
const round = (mm: number): number => Math.round(mm * ROUND) / ROUND;

export function movedBy(setup: OneSetup, ids: ReadonlySet<number>, dx: number, dy: number): OneSetup {
  return { ...setup, placements: setup.placements.map((p) => (ids.has(p.id) ? { ...p, x: round(p.x + dx), y: round(p.y + dy) } : p)) };
}

export function turnedBy(setup: OneSetup, ids: ReadonlySet<number>, deg: number): OneSetup {
  return { ...setup, placements: setup.placements.map((p) => (ids.has(p.id) ? { ...p, rotationDeg: (((p.rotationDeg + deg) % 360) + 360) % 360 } : p)) };
}

export function samePlaces(a: Layout, b: Layout): boolean {
  return a === b || (a.setups.length === b.setups.length && a.setups.every((setup, i) => setup.turns === b.setups[i].turns && setup.placements.every((p, k) => samePlace(p, b.setups[i].placements[k]))));
}

export function samePlace(a: Placement, b: Placement | undefined): boolean {
  return b !== undefined && a.id === b.id && a.x === b.x && a.y === b.y && a.rotationDeg === b.rotationDeg;
}

export interface SnapLines { x: number | null; y: number | null }

/**
 * Where a drag by (dx, dy) from `start` ends when it snaps: to neighbours' middles first, else to the grid, in each direction by itself. The
 * first of `ids` leads; the others keep their distance to it. `lines`: what it snapped to, to be shown.
 */
export function snapped(start: OneSetup, ids: readonly number[], dx: number, dy: number, { gridMm, reachMm }: { gridMm: number; reachMm: number }): { dx: number; dy: number; lines: SnapLines } {
  const lead = start.placements.find(({ id }) => id === ids[0]);
  if (!lead) return { dx, dy, lines: { x: null, y: null } };
  const others = start.placements.filter(({ id }) => !ids.includes(id));
  const along = (axis: 'x' | 'y', by: number) => {
    const at = lead[axis] + by;
    const nearest = others.map((other) => other[axis]).sort((a, b) => Math.abs(a - at) - Math.abs(b - at))[0];
    if (nearest !== undefined && Math.abs(nearest - at) <= reachMm) return { by: nearest - lead[axis], line: nearest };
    return { by: Math.round(at / gridMm) * gridMm - lead[axis], line: null };
  };
  const x = along('x', dx), y = along('y', dy);
  return { dx: x.by, dy: y.by, lines: { x: x.line, y: y.line } };
}
