/** How far an arrow key moves a thing, mm: 1, with Shift 5, with Alt 0.1. Null for every other key. */
import type { Point } from '../../../server/engine/geometry/types.ts';

const DIRECTIONS: Record<string, Point> = { ArrowLeft: { x: -1, y: 0 }, ArrowRight: { x: 1, y: 0 }, ArrowUp: { x: 0, y: -1 }, ArrowDown: { x: 0, y: 1 } };

export function stepOf(event: { key: string; shiftKey: boolean; altKey: boolean; ctrlKey: boolean; metaKey: boolean }): Point | null {
  const direction = DIRECTIONS[event.key];
  if (!direction || event.ctrlKey || event.metaKey) return null;
  const stepMm = event.altKey ? 0.1 : event.shiftKey ? 5 : 1;
  return { x: direction.x * stepMm, y: direction.y * stepMm };
}
