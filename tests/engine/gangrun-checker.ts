/**
 * Checks a plan against its order by its own means: polygons and distances of jsts, counts by hand. Nothing of the planner is used but
 * the types and the die's outline; the turning of the sheet and the place of a label are worked out anew from their definition.
 */
import Coordinate from 'jsts/org/locationtech/jts/geom/Coordinate.js';
import GeometryFactory from 'jsts/org/locationtech/jts/geom/GeometryFactory.js';
import ConvexHull from 'jsts/org/locationtech/jts/algorithm/ConvexHull.js';
import DistanceOp from 'jsts/org/locationtech/jts/operation/distance/DistanceOp.js';
import { dieOutline } from '../../server/engine/fit/die-outline.ts';
import type { Placement, RunLine, RunOrder, RunPlan, Setup } from '../../server/engine/gangrun/index.ts';

interface P { x: number; y: number }
interface Shape { points: P[]; geometry: unknown }
const factory = new GeometryFactory();
/** Finer than a stamp can be set, mm. */
const SLACK_MM = 0.01;

function hullOf(points: P[]): Shape {
  const hull = new ConvexHull(points.map((p) => new Coordinate(p.x, p.y)), factory).getConvexHull();
  return { points, geometry: hull };
}
const distance = (a: Shape, b: Shape): number => DistanceOp.distance(a.geometry, b.geometry) as number;

function turned(p: P, deg: number): P {
  const rad = (deg * Math.PI) / 180;
  return { x: p.x * Math.cos(rad) - p.y * Math.sin(rad), y: p.x * Math.sin(rad) + p.y * Math.cos(rad) };
}
const plus = (a: P, b: P): P => ({ x: a.x + b.x, y: a.y + b.y });
const minus = (a: P, b: P): P => ({ x: a.x - b.x, y: a.y - b.y });

/** All that is wrong, in words; none where the plan keeps the order's rules. */
export function faultsOf(order: RunOrder, plan: RunPlan): string[] {
  const faults: string[] = [];
  const line = (id: string): RunLine => order.lines.find((row) => row.id === id)!;
  const corner = order.platform.corner ?? 'top-left';
  const origin = { x: corner.endsWith('left') ? 0 : order.platform.widthMm - order.sheet.widthMm, y: corner.startsWith('top') ? 0 : order.platform.heightMm - order.sheet.heightMm };
  const centre = plus(origin, { x: order.sheet.widthMm / 2, y: order.sheet.heightMm / 2 });

  const label = (placement: Placement, row: RunLine): P[] => {
    const angle = placement.rotationDeg - row.pieces[0].rotationDeg;
    return dieOutline(order.dies.find((die) => die.id === row.dieId)!.geometry).rings.flat().map((q) => plus(placement, turned(minus(q, row.pieces[0].centre), angle)));
  };
  const inks = (placement: Placement): P[][] => {
    const row = line(placement.lineIds[0]), angle = placement.rotationDeg - row.pieces[0].rotationDeg;
    return row.pieces.map((piece) => {
      const points = order.stamps.find((stamp) => stamp.id === piece.stampId)!.artwork.rings.flat();
      const xs = points.map((p) => p.x), ys = points.map((p) => p.y);
      const middle = { x: (Math.min(...xs) + Math.max(...xs)) / 2, y: (Math.min(...ys) + Math.max(...ys)) / 2 };
      const at = plus(placement, turned(minus(piece.centre, row.pieces[0].centre), angle));
      return points.map((p) => plus(at, turned(minus(p, middle), angle + piece.rotationDeg)));
    });
  };
  const near = (what: string, a: Shape, b: Shape, least: number) => {
    const d = distance(a, b);
    if (d < least - SLACK_MM) faults.push(`${what}: ${d.toFixed(3)} mm, ${least} mm asked`);
  };
  const inside = (what: string, points: P[], from: P, to: P) => {
    if (points.some((p) => p.x < from.x - SLACK_MM || p.y < from.y - SLACK_MM || p.x > to.x + SLACK_MM || p.y > to.y + SLACK_MM)) faults.push(what);
  };

  plan.setups.forEach((setup, s) => checkSetup(setup, s));
  function checkSetup(setup: Setup, s: number): void {
    const m = order.sheet.marginMm, { sheet, platform } = order;
    const all = setup.placements.flatMap((placement) => placement.lineIds.map((id) => ({ placement, points: label(placement, line(id)) })));
    for (const { placement, points } of all) inside(`setup ${s}, place ${placement.id}: cut line off the sheet`, points, plus(origin, { x: m, y: m }), plus(origin, { x: sheet.widthMm - m, y: sheet.heightMm - m }));
    for (let turn = 0; turn < setup.turns; turn++) {
      const impressions = all.map(({ placement, points }) => ({ placement, shape: hullOf(points.map((p) => plus(centre, turned(minus(p, centre), (-turn * 360) / setup.turns)))) }));
      const first = all.map(({ placement, points }) => ({ placement, shape: hullOf(points) }));
      first.forEach((a, i) => impressions.forEach((b, k) => {
        if (turn === 0 && (k <= i || a.placement === b.placement)) return;
        near(`setup ${s}, places ${a.placement.id} and ${b.placement.id} (turn ${turn})`, a.shape, b.shape, order.gapMm + (turn === 0 ? 0 : order.turnToleranceMm));
      }));
    }
    const bodies = setup.placements.flatMap((placement) => inks(placement).map((points, i) => ({ placement, shape: hullOf(points), trim: order.stamps.find((stamp) => stamp.id === placement.stamps[i].stampId)!.trimMm })));
    const lid = platform.lid ?? { x: 0, y: 0, w: platform.widthMm, h: platform.heightMm };
    bodies.forEach((a, i) => {
      inside(`setup ${s}, place ${a.placement.id}: ink off the lid`, a.shape.points, lid, plus(lid, { x: lid.w, y: lid.h }));
      inside(`setup ${s}, place ${a.placement.id}: ink off the sheet`, a.shape.points, origin, plus(origin, { x: sheet.widthMm, y: sheet.heightMm }));
      for (const keep of platform.keepOuts) near(`setup ${s}, place ${a.placement.id} and a keep-out`, a.shape, hullOf([keep, plus(keep, { x: keep.w, y: 0 }), plus(keep, { x: keep.w, y: keep.h }), plus(keep, { x: 0, y: keep.h })]), a.trim);
      bodies.slice(i + 1).forEach((b) => near(`setup ${s}, stamps of ${a.placement.id} and ${b.placement.id}`, a.shape, b.shape, a.trim + b.trim));
    });
    setup.placements.forEach((a, i) => setup.placements.slice(i + 1).forEach((b) => {
      const used = new Set([...a.lineIds, ...b.lineIds].flatMap((id) => line(id).pieces.map((piece) => piece.inkId)));
      if (used.size > 1) near(`setup ${s}, inks of ${a.id} and ${b.id}`, hullOf(inks(a).flat()), hullOf(inks(b).flat()), Math.max(...[...used].map((id) => order.inks.find((ink) => ink.id === id)!.clearMm)));
    }));
    const copies = setup.placements.flatMap((placement) => placement.stamps.map((stamp) => `${stamp.stampId} ${stamp.copy}`));
    if (new Set(copies).size !== copies.length) faults.push(`setup ${s}: a stamp stands at two places`);
    for (const placement of setup.placements) for (const { stampId, copy } of placement.stamps) if (copy < 1 || copy > order.stamps.find((stamp) => stamp.id === stampId)!.owned) faults.push(`setup ${s}: copy ${copy} of ${stampId} is not owned`);
    checkStrips(setup, s, all.map(({ points }) => points));
    checkPresses(setup, s);
  }

  function checkStrips(setup: Setup, s: number, labels: P[][]): void {
    const { widthMm, heightMm } = order.sheet, feed = order.maxFeedWidthMm;
    const axes = new Set(setup.stripCuts.map((cut) => cut.axis));
    if (axes.size > 1) faults.push(`setup ${s}: strips cut both ways`);
    for (const cut of setup.stripCuts) {
      for (const points of labels) for (let turn = 0; turn < setup.turns; turn++) {
        const along = points.map((p) => minus(plus(centre, turned(minus(p, centre), (-turn * 360) / setup.turns)), origin)[cut.axis]);
        if (Math.min(...along) < cut.atMm - SLACK_MM && Math.max(...along) > cut.atMm + SLACK_MM) faults.push(`setup ${s}: a strip cut goes through a label`);
      }
    }
    if (feed === undefined || Math.min(widthMm, heightMm) <= feed) return;
    const axis = setup.stripCuts[0]?.axis ?? 'x', whole = axis === 'x' ? widthMm : heightMm, other = axis === 'x' ? heightMm : widthMm;
    const edges = [0, ...setup.stripCuts.map((cut) => cut.atMm).sort((a, b) => a - b), whole];
    for (let i = 1; i < edges.length; i++) if (Math.min(edges[i] - edges[i - 1], other) > feed + SLACK_MM) faults.push(`setup ${s}: a piece is wider than the machine takes`);
  }

  function checkPresses(setup: Setup, s: number): void {
    const off = new Set<number>();
    setup.presses.forEach((press, i) => {
      for (const id of press.takeOff) {
        if (off.has(id)) faults.push(`setup ${s}: place ${id} comes off twice`);
        off.add(id);
        if (!setup.presses[i - 1]?.inked.some((inked) => inked.placement === id)) faults.push(`setup ${s}: place ${id} does not come off right after its last press`);
      }
      if (press.inked.length === 0) faults.push(`setup ${s}: a press makes nothing`);
      if (new Set(press.inked.map((inked) => inked.placement)).size !== press.inked.length) faults.push(`setup ${s}: a place makes two labels in one press`);
      for (const { placement, lineId } of press.inked) {
        if (off.has(placement)) faults.push(`setup ${s}: place ${placement} is inked after it came off`);
        if (!setup.placements.find((row) => row.id === placement)?.lineIds.includes(lineId)) faults.push(`setup ${s}: ${lineId} is not made at place ${placement}`);
      }
    });
    const seen = setup.presses.map((press) => `${press.sheet} ${press.turn}`);
    if (new Set(seen).size !== seen.length) faults.push(`setup ${s}: a sheet is pressed twice in one turn`);
    if (setup.presses.some((press) => press.turn < 0 || press.turn >= setup.turns)) faults.push(`setup ${s}: a turn that it does not have`);
  }

  const made = new Map<string, number>();
  for (const press of plan.setups.flatMap((setup) => setup.presses)) for (const { lineId } of press.inked) made.set(lineId, (made.get(lineId) ?? 0) + 1);
  for (const row of order.lines) {
    const wanted = plan.unplaced.some((u) => u.lineId === row.id) ? 0 : row.quantity + row.overs;
    if ((made.get(row.id) ?? 0) !== wanted) faults.push(`${row.id}: ${made.get(row.id) ?? 0} made, ${wanted} wanted`);
  }
  const sheetsOf = plan.setups.map((setup) => new Set(setup.presses.map((press) => press.sheet)));
  sheetsOf.forEach((sheets, i) => sheetsOf.slice(i + 1).forEach((others) => [...sheets].some((sheet) => others.has(sheet)) && faults.push('a sheet belongs to two setups')));

  checkCuts();
  function checkCuts(): void {
    const cut = new Set<string>();
    const key = (sheet: number, placement: number, turn: number) => `${sheet} ${placement} ${turn}`;
    for (const pass of plan.cutPasses) {
      const setup = plan.setups.find((row) => row.presses.some((press) => press.sheet === pass.sheet))!;
      const used = pass.cuts.map((c) => `${c.dieId} ${c.dieCopy}`);
      if (new Set(used).size !== used.length) faults.push(`sheet ${pass.sheet}: a die is used twice in a pass`);
      const shapes = pass.cuts.map((c) => {
        if (cut.has(key(pass.sheet, c.placement, c.turn))) faults.push(`sheet ${pass.sheet}: a label is cut twice`);
        cut.add(key(pass.sheet, c.placement, c.turn));
        const die = order.dies.find((row) => row.id === c.dieId)!;
        if (c.dieCopy < 1 || c.dieCopy > die.owned || line(c.lineId).dieId !== c.dieId) faults.push(`sheet ${pass.sheet}: die ${c.dieId} copy ${c.dieCopy} is not to be had`);
        const placement = setup.placements.find((row) => row.id === c.placement)!;
        return { rim: die.geometry.rimMm ?? 0, shape: hullOf(label(placement, line(c.lineId)).map((p) => plus(centre, turned(minus(p, centre), (-c.turn * 360) / setup.turns)))) };
      });
      shapes.forEach((a, i) => shapes.slice(i + 1).forEach((b) => near(`sheet ${pass.sheet}: rims`, a.shape, b.shape, a.rim + b.rim)));
    }
    const toCut = plan.setups.flatMap((setup) => setup.presses.flatMap((press) => press.inked.filter(({ lineId }) => (line(lineId).cut ?? 'die') === 'die').map(({ placement }) => key(press.sheet, placement, press.turn))));
    if (toCut.length !== cut.size || toCut.some((k) => !cut.has(k))) faults.push(`${toCut.length} labels to cut, ${cut.size} cut`);
  }

  const pace = order.pace ?? { setup: 4, perStamp: 1 / 3, press: 1 / 2, perInked: 8 / 60, cutPass: 3 / 4 };
  const presses = plan.setups.flatMap((setup) => setup.presses);
  const minutes = pace.setup * plan.setups.length + pace.perStamp * plan.setups.flatMap((setup) => setup.placements.flatMap((p) => p.stamps)).length + pace.press * presses.length
    + pace.perInked * presses.flatMap((press) => press.inked.flatMap(({ lineId }) => line(lineId).pieces)).length + pace.cutPass * plan.cutPasses.length;
  const sheets = new Set(presses.map((press) => press.sheet)).size;
  const expected = { setups: plan.setups.length, presses: presses.length, sheets, cutPasses: plan.cutPasses.length, minutes };
  for (const [name, value] of Object.entries(expected)) {
    const told = plan.totals[name as keyof typeof expected];
    if (Math.abs(told - value) > 1e-6) faults.push(`totals.${name} says ${told}, it is ${value}`);
    if (plan.atLeast[name as keyof typeof expected] > value + 1e-6) faults.push(`atLeast.${name} is ${plan.atLeast[name as keyof typeof expected]}, the plan has ${value}`);
  }
  return faults;
}
