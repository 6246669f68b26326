/**
 * Best tilt of an artwork round a turn in a convex area, where a fit at a fixed angle is exact: branch and bound over the angle.
 *
 * A tilt by half an angle h moves no ink farther than 2·swing·sin(h/2) if the place may follow, where swing is the radius of a circle round
 * all ink; so the best border over an interval is at most the one at its middle plus that. Intervals that cannot beat the best are
 * dropped, others halved, best bound first. An upright artwork is preferred: a tilt must gain more than the flattening
 * of a round label could pretend. Degrees; cost: some fifty fits at fixed angles.
 */
import type { PreparedArtwork } from './prepared.ts';
import type { ProvenPlace } from './fit-pair.ts';

/** A tilt that gains less is not worth its looks, and may be no gain at all in a circle drawn as chords. */
const WORTH_TILTING_MM = 0.008;
/** What is left open in all, against the upright artwork as well as against the best tilt. */
const TILT_GAP_MM = 0.012;

export type FitAt = (angleDeg: number) => ProvenPlace;

interface Interval { middleDeg: number; halfDeg: number; bound: number }

/** `worthMm`: a place no better than this need not be found, only ruled out. */
export function tiltedFit(artwork: PreparedArtwork, turnDeg: number, tiltDeg: number, fitAt: FitAt, worthMm: number): ProvenPlace {
  const upright = fitAt(turnDeg);
  let best = upright;
  let dropped = upright.bound;
  const enough = (): number => Math.max(best.border, worthMm) + TILT_GAP_MM;
  const gain = (halfDeg: number): number => 2 * artwork.swingMm * Math.sin((halfDeg * Math.PI) / 360);

  const open: Interval[] = [];
  const look = (middleDeg: number, halfDeg: number): void => {
    const place = fitAt(middleDeg);
    if (place.border > best.border && place.border > upright.border + WORTH_TILTING_MM) best = place;
    const bound = place.bound + gain(halfDeg);
    if (bound <= enough()) dropped = Math.max(dropped, bound);
    else open.push({ middleDeg, halfDeg, bound });
  };

  // Either side of upright, which has been looked at and is no interval of its own.
  for (const side of [-1, 1]) look(turnDeg + (side * tiltDeg) / 2, tiltDeg / 2);
  while (open.length > 0) {
    const at = open.reduce((most, interval, i) => (interval.bound > open[most].bound ? i : most), 0);
    const [{ middleDeg, halfDeg, bound }] = open.splice(at, 1);
    if (bound <= enough()) { dropped = Math.max(dropped, bound); break; }
    for (const side of [-1, 1]) look(middleDeg + (side * halfDeg) / 2, halfDeg / 2);
  }
  if (best !== upright) best = steadied(best, turnDeg, tiltDeg, fitAt);
  return { ...best, bound: Math.max(best.border, dropped) };
}

const STEADY_START_DEG = 0.25;
const STEADY_END_DEG = 0.002;

/** The last hundredths, by steps to either side that are halved: 6.99° becomes the 7° that was meant. */
function steadied(from: ProvenPlace, turnDeg: number, tiltDeg: number, fitAt: FitAt): ProvenPlace {
  let best = from;
  for (let step = STEADY_START_DEG; step > STEADY_END_DEG;) {
    const tries = [-step, step].map((by) => Math.max(turnDeg - tiltDeg, Math.min(turnDeg + tiltDeg, best.artwork.angleDeg + by)));
    const better = tries.map(fitAt).find((place) => place.border > best.border + 1e-9);
    if (better) best = better;
    else step /= 2;
  }
  return best;
}
