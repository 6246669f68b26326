/**
 * One artwork in one die over all turns and tilts allowed: picks the method (exact where the area is convex, branch and bound
 * elsewhere), the turn, and words for the result.
 */
import { concaveFit } from './concave-fit.ts';
import { convexFit, type Place } from './convex-fit.ts';
import { describedPlace } from './described-place.ts';
import { centredTarget, turnArtwork, type PreparedArtwork, type PreparedDie, type TurnedArtwork } from './prepared.ts';
import { tiltedFit } from './tilted-fit.ts';
import type { Fit, FitOptions } from './types.ts';

/** A place with what is proven about it. */
export interface ProvenPlace extends Place {
  bound: number;
  artwork: TurnedArtwork;
  /** Looked at by the search; none where the programme answered. */
  cells?: number;
}

/** A later turn must be better by more than this to win: below it the difference is rounding. */
const BETTER_TURN_EXACT_MM = 1e-9;
/** The same where places are only found to within a proof's gap (0.012 mm); together with that gap it stays within 0.02 mm. */
const BETTER_TURN_SEARCHED_MM = 0.005;

export function fitPair(artwork: PreparedArtwork, die: PreparedDie, options: FitOptions): Fit {
  const turnsDeg = options.turnsDeg?.length ? options.turnsDeg : [0];
  const tiltDeg = options.tiltDeg ?? 0;
  if (!(tiltDeg >= 0 && tiltDeg <= 180)) throw new RangeError(`A tilt is an angle from 0 to 180, not ${tiltDeg}.`);
  let best: ProvenPlace | null = null;
  let bound = -Infinity;
  const margin = die.concave === null && tiltDeg === 0 ? BETTER_TURN_EXACT_MM : BETTER_TURN_SEARCHED_MM;
  for (const turnDeg of turnsDeg) {
    const place: ProvenPlace = fitRound(artwork, die, turnDeg, tiltDeg, best === null ? -Infinity : best.border);
    bound = Math.max(bound, place.bound);
    if (best === null || place.border > best.border + margin) best = place;
  }
  if (best === null) throw new Error('At least one turn is always tried.');
  return { ...describedPlace(die, best.artwork, best, options), boundMm: Math.max(bound, best.border) + die.shiftMm };
}

/** One turn and the tilts round it. `worthMm`: a place no better than this need not be found, only ruled out. */
export function fitRound(artwork: PreparedArtwork, die: PreparedDie, turnDeg: number, tiltDeg = 0, worthMm = -Infinity): ProvenPlace {
  if (die.concave !== null) return concaveFit(artwork, die, die.concave, { turnDeg, tiltDeg, worthMm });
  const fitAt = (angleDeg: number): ProvenPlace => {
    const turned = turnArtwork(artwork, angleDeg);
    const place = convexFit(die.halfPlanes, turned, centredTarget(die, turned));
    return { ...place, bound: place.border, artwork: turned };
  };
  return tiltDeg === 0 ? fitAt(turnDeg) : tiltedFit(artwork, turnDeg, tiltDeg, fitAt, worthMm);
}
