/**
 * One artwork in one die over all turns and tilts allowed: picks the method (exact where the area is convex, branch and bound
 * elsewhere), the turn, and words for the result.
 */
import { concaveFit, type SearchOptions } from './concave-fit.ts';
import { convexFit, type Place } from './convex-fit.ts';
import { describedPlace } from './described-place.ts';
import { centredTarget, turnArtwork, type PreparedArtwork, type PreparedDie, type TurnedArtwork } from './prepared.ts';
import { tiltedFit, type FitAt } from './tilted-fit.ts';
import type { Fit, FitOptions } from './types.ts';

/** A place with what is proven about it. */
export interface ProvenPlace extends Place {
  bound: number;
  artwork: TurnedArtwork;
  /** Looked at by the search; none where the programme answered. */
  squares?: number;
}

/** A later turn must be better by more than this to win: below it the difference is rounding. */
const BETTER_TURN_CONVEX_MM = 1e-9;
/** The same where places are only found to within the proof's gap; together with that gap it stays within 0.02 mm. */
const BETTER_TURN_SEARCHED_MM = 0.005;
/** Gap of the search at a fixed angle; smaller where many angles are compared. */
export const SEARCH_GAP_MM = 0.01;
const SEARCH_GAP_TILTED_MM = 0.005;

export function fitPair(artwork: PreparedArtwork, die: PreparedDie, options: FitOptions): Fit {
  const turnsDeg = options.turnsDeg?.length ? options.turnsDeg : [0];
  const tiltDeg = options.tiltDeg ?? 0;
  if (!(tiltDeg >= 0 && tiltDeg <= 180)) throw new RangeError(`A tilt is an angle from 0 to 180, not ${tiltDeg}.`);
  let best: ProvenPlace | null = null;
  let bound = -Infinity;
  for (const turnDeg of turnsDeg) {
    const worthMm: number = best === null ? -Infinity : best.border;
    const gapMm = tiltDeg === 0 ? SEARCH_GAP_MM : SEARCH_GAP_TILTED_MM;
    const fitAt: FitAt = (angleDeg, worth) => fitAtTurn(artwork, die, angleDeg, { gapMm, worthMm: worth });
    const place: ProvenPlace = tiltDeg === 0 ? fitAt(turnDeg, worthMm) : tiltedFit(artwork, turnDeg, tiltDeg, die.concave === null ? 0 : gapMm, fitAt, worthMm);
    bound = Math.max(bound, place.bound);
    const margin = die.concave === null ? BETTER_TURN_CONVEX_MM : BETTER_TURN_SEARCHED_MM;
    if (best === null || place.border > best.border + margin) best = place;
  }
  if (best === null) throw new Error('At least one turn is always tried.');
  return { ...describedPlace(die, best.artwork, best, options), boundMm: Math.max(bound, best.border) + die.shiftMm };
}

/** `worthMm`: a place no better than this need not be found; only that there is none better must be proven. */
export function fitAtTurn(artwork: PreparedArtwork, die: PreparedDie, angleDeg: number, search: Pick<SearchOptions, 'gapMm' | 'worthMm'> = { gapMm: SEARCH_GAP_MM, worthMm: -Infinity }): ProvenPlace {
  const turned = turnArtwork(artwork, angleDeg);
  const target = centredTarget(die, turned);
  if (die.concave === null) {
    const place = convexFit(die.halfPlanes, turned, target);
    return { ...place, bound: place.border, artwork: turned };
  }
  return { ...concaveFit(artwork, turned, die, die.concave, { target, ...search }), artwork: turned };
}
