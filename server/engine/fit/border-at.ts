/**
 * The fit of an artwork at a place that somebody chose, for moving it by hand: the same figures as bestFit gives for its own place, with
 * no search. A placer is made once for a pair and asked at each step of a drag; an answer takes well under a millisecond.
 * Lengths mm in the box of the cut line, turns in degrees clockwise about the centre of the artwork's unturned box. Throws like bestFit.
 */
import type { Outline, Point } from '../geometry/types.ts';
import { borderInArea, turnedInk, type TurnedInk } from './border-in-area.ts';
import type { BorderConstraints } from './border-programme.ts';
import { borderAtPlace, placeConstraints } from './convex-fit.ts';
import { describedPlace, type PlacedFit } from './described-place.ts';
import { prepareArtwork, prepareDie, turnArtwork, type TurnedArtwork } from './prepared.ts';
import type { DieGeometry, FitOptions } from './types.ts';

export type { PlacedFit } from './described-place.ts';

export interface Placer { at(centre: Point, rotationDeg: number): PlacedFit }

export function createPlacer(artwork: Outline, die: DieGeometry, limits: Pick<FitOptions, 'goodMm' | 'snugMm'> = {}): Placer {
  const preparedArtwork = prepareArtwork(artwork), preparedDie = prepareDie(die);
  // A drag asks for many places at one turn.
  let turn: { turned: TurnedArtwork; constraints: BorderConstraints; ink: TurnedInk | null } | undefined;
  return {
    at(centre, rotationDeg) {
      if (!Number.isFinite(centre.x) || !Number.isFinite(centre.y)) throw new RangeError(`A place must be two numbers, not ${centre.x}, ${centre.y}.`);
      if (turn?.turned.angleDeg !== rotationDeg) {
        const turned = turnArtwork(preparedArtwork, rotationDeg);
        turn = { turned, constraints: placeConstraints(preparedDie.halfPlanes, turned.hull), ink: preparedDie.concave ? turnedInk(preparedArtwork, turned) : null };
      }
      const border = preparedDie.concave && turn.ink
        ? borderInArea(preparedDie.concave, turn.ink, centre.x, centre.y)
        : borderAtPlace(turn.constraints, centre.x, centre.y);
      return describedPlace(preparedDie, turn.turned, { ...centre, border }, limits);
    },
  };
}

export function borderAt(artwork: Outline, die: DieGeometry, centre: Point, rotationDeg = 0, limits: Pick<FitOptions, 'goodMm' | 'snugMm'> = {}): PlacedFit {
  return createPlacer(artwork, die, limits).at(centre, rotationDeg);
}
