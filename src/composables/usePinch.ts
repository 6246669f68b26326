/** Two fingers on a drawing: how much they spread, about which middle, and how far that moved. */
import type { Point } from '../../server/engine/geometry/types.ts';

export function usePinch(told: (factor: number, middle: Point, dx: number, dy: number) => void) {
  const fingers = new Map<number, Point>();
  const state = () => {
    const [a, b] = [...fingers.values()];
    return { spread: Math.hypot(a.x - b.x, a.y - b.y), middle: { x: (a.x + b.x) / 2, y: (a.y + b.y) / 2 } };
  };
  return {
    /** True while two fingers are down: then nothing else is meant. */
    down(id: number, at: Point): boolean {
      fingers.set(id, at);
      return fingers.size === 2;
    },
    move(id: number, at: Point): boolean {
      if (!fingers.has(id)) return false;
      if (fingers.size !== 2) {
        fingers.set(id, at);
        return false;
      }
      const before = state();
      fingers.set(id, at);
      const now = state();
      if (before.spread > 0) told(now.spread / before.spread, now.middle, now.middle.x - before.middle.x, now.middle.y - before.middle.y);
      return true;
    },
    up(id: number): void {
      fingers.delete(id);
    },
  };
}
