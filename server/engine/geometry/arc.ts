/**
 * Arcs as points. Input: centre, radii, start angle and sweep; output: points on the true curve, both ends included, in the
 * direction of the sweep. Angles are degrees clockwise as seen on the page (y down) from the x axis: 0 right, 90 down.
 *
 * The chords stay within `toleranceMm` of the curve: an ellipse is the image of a circle under a map that stretches by no more
 * than its larger radius, so the circle's sagitta r(1 − cos(step/2)) bounds it. Every multiple of 90° inside the sweep is a
 * point, so that the box of an arc is exact. Cost: one point per step. A radius of 0 gives the centre.
 */
import { sinCos } from './transform.ts';
import type { Point } from './types.ts';

/**
 * Half of the 0.02 mm that a cut line may be off: the other half is left to those who offset the flattened line.
 */
export const ARC_TOLERANCE_MM = 0.01;

export function ellipseArc(centre: Point, rx: number, ry: number, fromDeg: number, sweepDeg: number, toleranceMm = ARC_TOLERANCE_MM): Point[] {
  const at = (angleDeg: number): Point => {
    const { sin, cos } = sinCos(angleDeg);
    return { x: centre.x + rx * cos, y: centre.y + ry * sin };
  };
  const stepDeg = arcStepDeg(Math.max(rx, ry), toleranceMm);
  const direction = Math.sign(sweepDeg) || 1;
  const points = [at(fromDeg)];
  // Piece by piece between quadrant points, each piece in equal steps.
  const toDeg = fromDeg + sweepDeg;
  for (let a = fromDeg; (toDeg - a) * direction > ANGLE_EPS_DEG;) {
    const next = direction > 0 ? Math.floor(a / 90 + 1 + ANGLE_EPS_DEG) * 90 : Math.ceil(a / 90 - 1 - ANGLE_EPS_DEG) * 90;
    const end = (next - toDeg) * direction > 0 ? toDeg : next;
    const steps = Math.max(1, Math.ceil(Math.abs(end - a) / stepDeg - ANGLE_EPS_DEG));
    for (let i = 1; i <= steps; i++) points.push(at(i === steps ? end : a + ((end - a) * i) / steps));
    a = end;
  }
  return points;
}
/** Below this two angles are one: 1e-9° at a metre is 2e-11 mm. */
const ANGLE_EPS_DEG = 1e-9;

export function circleArc(centre: Point, radius: number, fromDeg: number, sweepDeg: number, toleranceMm?: number): Point[] {
  return ellipseArc(centre, radius, radius, fromDeg, sweepDeg, toleranceMm);
}

/** Largest step whose chord stays within the tolerance; never more than a quarter turn. */
export function arcStepDeg(radius: number, toleranceMm = ARC_TOLERANCE_MM): number {
  if (!(radius > toleranceMm)) return 90;
  return Math.min(90, (2 * Math.acos(1 - toleranceMm / radius) * 180) / Math.PI);
}
