/**
 * Plain rectangles packed exactly: depth first over the lowest place of a skyline, for sheets that they fill to the last mm.
 *
 * Serves where every label is an upright rectangle and the sheet is not turned. With each rectangle grown by the gap, and the
 * sheet as well, gaps vanish. At the lowest, leftmost stretch of the skyline every rectangle that is left is tried in both of
 * its turns, larger ones first, or the stretch is given up to the level of its lower neighbour; a branch ends where the waste
 * is more than there is to waste (A. Bortfeldt and E. Hopper name the skyline heuristics; the search is the plain one).
 * Cost: exponential, held by a number of nodes. Null where nothing was found, which proves nothing.
 */
import { ringBox } from '../geometry/ring.ts';
import type { Kind, Pose } from './kinds.ts';
import { isFree, regionOf } from './packing.ts';
import type { PackingSpace, Placed } from './packing.ts';
import { obstaclesOf } from './obstacles.ts';
import type { OrderShapes } from './place-geometry.ts';

/** Nodes tried at effort 1. */
const NODES = 40_000;
const MOST_RECTANGLES = 24;
/** Rounding of sums, mm. */
const TOUCH_MM = 1e-6;

interface Stretch { x: number; w: number; y: number }

export function packRectangles(space: PackingSpace, { order }: OrderShapes, kinds: readonly Kind[]): Placed[] | null {
  if (space.turns !== 1 || space.cells.length !== 1 || kinds.length > MOST_RECTANGLES || !kinds.every((kind) => kind.poses.every(isRectangle))) return null;
  const [cell] = space.cells;
  const gap = order.gapMm;
  const [width, height] = [cell.w + gap, cell.h + gap];
  const sizes = new Map(kinds.flatMap((kind) => kind.poses.map((pose) => [pose, { w: pose.labelBox.w + gap, h: pose.labelBox.h + gap }])));
  const area = (kind: Kind) => sizes.get(kind.poses[0])!.w * sizes.get(kind.poses[0])!.h;
  const spare = width * height - kinds.reduce((sum, kind) => sum + area(kind), 0);
  if (spare < -TOUCH_MM * (width + height)) return null;
  const byArea = [...kinds].sort((a, b) => area(b) - area(a) || a.index - b.index);
  const placed: Placed[] = [];
  let nodes = Math.round(NODES * (order.effort ?? 1));

  function place(skyline: Stretch[], left: readonly Kind[], waste: number): boolean {
    if (left.length === 0) return true;
    if (nodes-- <= 0 || space.budget.stopped()) return false;
    const at = lowest(skyline);
    const here = skyline[at];
    const tried = new Set<string>();
    for (const kind of left) {
      for (const pose of kind.poses) {
        const { w, h } = sizes.get(pose)!;
        if (w > here.w + TOUCH_MM || here.y + h > height + TOUCH_MM) continue;
        const plain = kind.lines.length === 1 && order.platform.keepOuts.length === 0;
        const key = `${w.toFixed(6)} ${h.toFixed(6)}`;
        if (plain && tried.has(key)) continue;
        tried.add(key);
        const spot = { pose, x: cell.x + here.x - pose.labelBox.x, y: cell.y + here.y - pose.labelBox.y };
        if (!stands(space, placed, spot)) continue;
        placed.push(spot);
        if (place(raise(skyline, at, w, here.y + h), left.filter((other) => other !== kind), waste)) return true;
        placed.pop();
      }
    }
    const level = Math.min(skyline[at - 1]?.y ?? Infinity, skyline[at + 1]?.y ?? Infinity);
    const lost = here.w * (Math.min(level, height) - here.y);
    if (level === Infinity || lost > waste + TOUCH_MM * (width + height)) return false;
    return place(raise(skyline, at, here.w, level), left, waste - lost);
  }

  return place([{ x: 0, w: width, y: 0 }], byArea, spare) ? placed : null;
}

function isRectangle(pose: Pose): boolean {
  const box = ringBox(pose.shape.labels[0]);
  return pose.shape.labels.every((ring) => ring.length === 4 && ring.every((p) => onEdge(p.x, box.x, box.w) && onEdge(p.y, box.y, box.h)));
}

const onEdge = (value: number, start: number, size: number): boolean => Math.abs(value - start) < TOUCH_MM || Math.abs(value - start - size) < TOUCH_MM;

/** Ink, lid, bodies and keep-outs; labels are kept apart by the skyline. */
function stands(space: PackingSpace, placed: readonly Placed[], spot: Placed): boolean {
  const region = regionOf(spot.pose, space.cells[0], space.frame);
  if (!region || spot.x < region.x - TOUCH_MM || spot.x > region.x + region.w + TOUCH_MM || spot.y < region.y - TOUCH_MM || spot.y > region.y + region.h + TOUCH_MM) return false;
  const needed = [...spot.pose.kind.stamps].every(([id, n]) => n + placed.reduce((m, p) => m + (p.pose.kind.stamps.get(id) ?? 0), 0) <= space.stamps.find((s) => s.id === id)!.owned);
  return needed && isFree([...space.maker.fixed(spot.pose), ...placed.flatMap((p) => obstaclesOf(space.maker, p.pose, p, spot.pose, 1, space.frame))], spot);
}

function lowest(skyline: readonly Stretch[]): number {
  return skyline.reduce((best, stretch, i) => (stretch.y < skyline[best].y - TOUCH_MM ? i : best), 0);
}

/** The first w mm of a stretch at a new height; stretches of one height become one. */
function raise(skyline: readonly Stretch[], at: number, w: number, y: number): Stretch[] {
  const here = skyline[at];
  const rest = here.w - w;
  const raised = [...skyline.slice(0, at), { x: here.x, w: Math.min(w, here.w), y }, ...(rest > TOUCH_MM ? [{ x: here.x + w, w: rest, y: here.y }] : []), ...skyline.slice(at + 1)];
  return raised.reduce<Stretch[]>((out, stretch) => {
    const last = out[out.length - 1];
    if (last && Math.abs(last.y - stretch.y) < TOUCH_MM) out[out.length - 1] = { ...last, w: last.w + stretch.w };
    else out.push(stretch);
    return out;
  }, []);
}
