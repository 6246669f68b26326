/**
 * One artwork in one die over all turns and tilts allowed: picks the method (exact where the area is convex, branch and bound
 * elsewhere), the turn, and words for the result.
 */
import { concaveFit } from './concave-fit.ts';
import { convexFit, type Place } from './convex-fit.ts';
import { centredTarget, turnArtwork, type PreparedArtwork, type PreparedDie, type TurnedArtwork } from './prepared.ts';
import type { Fit, FitOptions } from './types.ts';
import { fitsWith, verdictOf } from './verdict.ts';

/** A place with what is proven about it. */
export interface ProvenPlace extends Place { bound: number; artwork: TurnedArtwork }

/** A later turn must be better by more than this to win: below it the difference is rounding. */
const BETTER_TURN_CONVEX_MM = 1e-9;
/** The same where places are only found to within the proof's gap; together with that gap it stays within 0.02 mm. */
const BETTER_TURN_SEARCHED_MM = 0.008;
/** Gap of the search itself. */
export const SEARCH_GAP_MM = 0.01;

export function fitPair(artwork: PreparedArtwork, die: PreparedDie, options: FitOptions): Fit {
  const turnsDeg = options.turnsDeg?.length ? options.turnsDeg : [0];
  const tiltDeg = options.tiltDeg ?? 0;
  if (!(tiltDeg >= 0 && tiltDeg <= 180)) throw new RangeError(`A tilt is an angle from 0 to 180, not ${tiltDeg}.`);
  let best: ProvenPlace | null = null;
  let bound = -Infinity;
  for (const turnDeg of turnsDeg) {
    const place = fitAtTurn(artwork, die, turnDeg, best === null ? -Infinity : best.border);
    bound = Math.max(bound, place.bound);
    const margin = die.concave === null ? BETTER_TURN_CONVEX_MM : BETTER_TURN_SEARCHED_MM;
    if (best === null || place.border > best.border + margin) best = place;
  }
  if (best === null) throw new Error('At least one turn is always tried.');
  return described(die, best, Math.max(bound, best.border), options);
}

/** `worthMm`: a place no better than this need not be found; only that there is none better must be proven. */
export function fitAtTurn(artwork: PreparedArtwork, die: PreparedDie, angleDeg: number, worthMm: number): ProvenPlace {
  const turned = turnArtwork(artwork, angleDeg);
  const target = centredTarget(die, turned);
  if (die.concave === null) {
    const place = convexFit(die.halfPlanes, turned, target);
    return { ...place, bound: place.border, artwork: turned };
  }
  return { ...concaveFit(artwork, turned, die, die.concave, { target, gapMm: SEARCH_GAP_MM, worthMm }), artwork: turned };
}

function described(die: PreparedDie, place: ProvenPlace, bound: number, options: FitOptions): Fit {
  const { box } = place.artwork;
  const area = die.areaBox;
  const borderMm = place.border + die.shiftMm;
  const verdict = die.nothingUsable ? 'no' : verdictOf(borderMm, options);
  return {
    fits: !die.nothingUsable && fitsWith(borderMm),
    borderMm, boundMm: bound + die.shiftMm,
    centre: { x: place.x, y: place.y },
    rotationDeg: place.artwork.angleDeg,
    margins: {
      left: place.x + box.x - area.x, right: area.x + area.w - (place.x + box.x + box.w),
      top: place.y + box.y - area.y, bottom: area.y + area.h - (place.y + box.y + box.h),
    },
    verdict,
  };
}
