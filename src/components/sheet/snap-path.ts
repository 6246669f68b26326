import type { Box } from '../../../server/engine/geometry/types.ts';

/** Lines across the bed through the neighbours' middles that a drag snapped to; empty where to none. */
export function snapPath(lines: { x: number | null; y: number | null }, bed: Box): string {
  return `${lines.x === null ? '' : `M${lines.x} ${bed.y}v${bed.h}`}${lines.y === null ? '' : `M${bed.x} ${lines.y}h${bed.w}`}`;
}
