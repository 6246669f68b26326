/**
 * The border of an artwork at a place that a person chose: what fit-pair.ts maximises, asked at one point. Exact.
 *
 * `centre` is where the middle of the artwork's unturned box lies in the box of the cut line, mm; `rotationDeg` turns it about that.
 * Below zero where ink is outside, as `Fit.borderMm` says. Preparing costs as much as a fit does; each place after that a
 * fraction of a millisecond, so that a drag can be followed. Nothing is mutated.
 */
import type { Outline, Point } from '../geometry/types.ts';
import { borderInArea, turnedInk } from './border-in-area.ts';
import { borderAtPlace, placeConstraints } from './convex-fit.ts';
import { prepareArtwork, prepareDie, turnArtwork } from './prepared.ts';
import type { DieGeometry } from './types.ts';

export type BorderAt = (centre: Point, rotationDeg: number) => number;

export function borderFinder(artwork: Outline, die: DieGeometry): BorderAt {
  const ink = prepareArtwork(artwork), label = prepareDie(die);
  let turned = turnArtwork(ink, 0);
  let ask = atTurn();

  function atTurn(): (centre: Point) => number {
    if (label.concave === null) {
      const constraints = placeConstraints(label.halfPlanes, turned.hull);
      return ({ x, y }) => borderAtPlace(constraints, x, y);
    }
    const area = label.concave, standing = turnedInk(ink, turned);
    return ({ x, y }) => borderInArea(area, standing, x, y);
  }

  return (centre, rotationDeg) => {
    // A drag keeps the turn: what depends on it is worked out once.
    if (turned.angleDeg !== rotationDeg) {
      turned = turnArtwork(ink, rotationDeg);
      ask = atTurn();
    }
    return ask(centre) + label.shiftMm;
  };
}
