import { convexFit } from './convex-fit.ts';
import type { Point } from '../geometry/types.ts';
import type { PreparedArtwork, PreparedDie, TurnedArtwork } from './prepared.ts';

export function concaveFit(_artwork: PreparedArtwork, turned: TurnedArtwork, die: PreparedDie, target: Point, _gapMm: number, _worthMm: number): { x: number; y: number; border: number; bound: number } {
  const place = convexFit(die.halfPlanes, turned, target);
  return { ...place, bound: place.border };
}
