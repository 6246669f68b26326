/**
 * Plans a gang run: which stamps stand where, in how many setups, pressed how often, cut in which passes.
 *
 * Input: an order (types.ts). Output: a complete plan of every line that can be made, the lines that cannot with the reason, and
 * a proven lower bound beside every total. Deterministic: effort is counted in steps, random choices come from the order's
 * seed, and more effort only adds attempts at the end, so it is never worse. The order is not mutated. Cost: about half a
 * second at effort 1 for twelve labels, a few seconds for forty.
 *
 * The search makes whole drafts, one after the other: the kinds in an order of preference, packed in a direction, in setups of a
 * number of turns; each draft is mended (more copies, counts spread over setups) and priced. It ends when the best one meets the
 * bounds or the steps are used up.
 */
import type { Control } from '../control.ts';
import { lowerBounds } from './bounds.ts';
import { cellChoices } from './cells.ts';
import type { Kind } from './kinds.ts';
import { neaten } from './neaten.ts';
import { obstacleMaker } from './obstacles.ts';
import type { ObstacleMaker } from './obstacles.ts';
import type { Direction, PackingSpace, StepBudget } from './packing.ts';
import { readPins } from './pins.ts';
import { orderShapes } from './place-geometry.ts';
import type { OrderShapes } from './place-geometry.ts';
import { makePlan } from './presses.ts';
import { packRectangles } from './rectangles.ts';
import { relax } from './relax.ts';
import { addCopies, fillSetups, shareCounts, toSetupDraft } from './setups.ts';
import type { DraftSetup } from './setups.ts';
import { allowedTurns, sheetFrame } from './sheet-frame.ts';
import type { SheetFrame } from './sheet-frame.ts';
import { spreadSetups } from './spread.ts';
import { sortOut } from './unplaced.ts';
import type { RunOrder, RunPlan, RunTotals, Setup } from './types.ts';

/** Steps at effort 1; calibrated so that twelve labels take well under a second. */
const BASE_STEPS = 150_000;
/** And for each kind beyond the twelfth. */
const STEPS_PER_KIND = 25_000;
/** Drafts that bring nothing new in a row, after which more of them are not worth their time. */
const PATIENCE = 24;

/** Pushing apart is for a sheet that is not too full, and for few labels. */
const LOOSE = 0.88, MOST_RELAXED = 16;
/** Starts of pushing apart in each attempt. */
const STARTS = 4;

type Made = Pick<RunPlan, 'setups' | 'cutPasses' | 'totals'>;
interface Best { drafts: DraftSetup[]; made: Made }

export function planGangRun(order: RunOrder, control?: Control): RunPlan {
  const shapes = orderShapes(order);
  const frame = sheetFrame(order);
  const sorted = sortOut(shapes, frame);
  const pins = readPins(shapes, sorted.kinds);
  const lost = new Set(pins.unplaced.map((row) => row.lineId));
  const kinds = sorted.kinds.filter((kind) => !kind.lines.some((line) => lost.has(line.id)));
  const lostKinds = sorted.kinds.filter((kind) => !kinds.includes(kind));
  const unplaced = [...sorted.unplaced, ...lostKinds.flatMap((kind) => kind.lines.map((line) =>
    pins.unplaced.find((row) => row.lineId === line.id) ?? { lineId: line.id, code: 'pin-conflict', message: 'A line of the same stamp is pinned where it cannot stand.' }))];
  const bySetup = pins.bySetup.map((some) => some.filter((place) => kinds.includes(place.pose.kind)));
  while (bySetup.length > 0 && bySetup[bySetup.length - 1].length === 0) bySetup.pop();
  const atLeast = lowerBounds(shapes, frame, kinds, bySetup.length);
  const isStopped = () => control?.stop !== undefined && Atomics.load(control.stop, 0) === 1;
  const search = new Search(shapes, frame, kinds, bySetup, atLeast, isStopped, control);
  const best = search.run();
  const stopped = search.cutShort;
  const neat = best && !stopped ? neaten(shapes, frame, best.drafts, (drafts) => search.price(drafts), best.made) : best?.made;
  control?.onProgress?.(1, 'Planned');
  const nothing: Made = { setups: [], cutPasses: [], totals: { setups: 0, presses: 0, sheets: 0, cutPasses: 0, minutes: 0, wastePercent: 0 } };
  return { ...(neat ?? nothing), atLeast, unplaced: unplaced.sort((a, b) => lineAt(order, a.lineId) - lineAt(order, b.lineId)), stopped };
}

const lineAt = (order: RunOrder, id: string): number => order.lines.findIndex((line) => line.id === id);

/** a before b? Ties go by the other figures, so that equal minutes take fewer sheets. */
export function compareTotals(aim: RunOrder['aim'], a: RunTotals, b: RunTotals): number {
  const keys = aim === 'time' ? (['minutes', 'sheets', 'setups'] as const) : (['sheets', 'minutes', 'setups'] as const);
  for (const key of keys) if (Math.abs(a[key] - b[key]) > 1e-9) return a[key] - b[key];
  return 0;
}

class Search {
  cutShort = false;
  private best: Best | null = null;
  private readonly makers = new Map<number, ObstacleMaker>();
  private readonly budget: StepBudget;
  private readonly total: number;
  private readonly shapes: OrderShapes;
  private readonly frame: SheetFrame;
  private readonly kinds: readonly Kind[];
  private readonly pinned: DraftSetup['placed'][];
  private readonly atLeast: RunPlan['atLeast'];
  private readonly isStopped: () => boolean;
  private readonly control?: Control;

  constructor(shapes: OrderShapes, frame: SheetFrame, kinds: readonly Kind[], pinned: DraftSetup['placed'][], atLeast: RunPlan['atLeast'], isStopped: () => boolean, control?: Control) {
    this.shapes = shapes;
    this.frame = frame;
    this.kinds = kinds;
    this.pinned = pinned;
    this.atLeast = atLeast;
    this.isStopped = isStopped;
    this.control = control;
    this.total = (BASE_STEPS + STEPS_PER_KIND * Math.max(0, kinds.length - 12)) * (shapes.order.effort ?? 1);
    // The first draft is made whole whatever happens: a plan is owed.
    this.budget = { left: this.total, stopped: () => this.best !== null && (this.budget.left <= 0 || this.isStopped()) };
  }

  run(): Best | null {
    if (this.kinds.length === 0) return null;
    const { order } = this.shapes;
    const next = randomFrom(order.seed);
    const turnsList = allowedTurns(order).reverse();
    const patience = PATIENCE * Math.max(1, order.effort ?? 1);
    let stale = 0;
    for (let attempt = 0; stale < patience; attempt++) {
      if (this.best && this.meetsBounds()) break;
      if (this.budget.stopped()) break;
      const turns = turnsList[attempt % turnsList.length];
      const round = Math.floor(attempt / turnsList.length);
      const direction = DIRECTIONS[round % DIRECTIONS.length];
      const kinds = preference(this.kinds, order.aim, Math.floor(round / DIRECTIONS.length), next);
      stale = this.attempt(turns, kinds, direction, round, next) ? 0 : stale + 1;
      this.control?.onProgress?.(Math.min(0.95, Math.max(stale / patience, 1 - this.budget.left / this.total)), 'Trying arrangements');
    }
    this.cutShort = this.isStopped() && !this.meetsBounds();
    return this.best;
  }

  private attempt(turns: Setup['turns'], kinds: Kind[], direction: Direction, round: number, next: () => number): boolean {
    let better = false;
    for (const space of this.spaces(turns)) {
      const whole = round === 0 && this.pinned.length === 0 ? packRectangles(space, this.shapes, kinds) : null;
      const drafts = whole ? [{ turns, placed: whole }] : fillSetups(() => space, this.pinned, kinds, direction);
      if (!drafts) continue;
      if (this.offer(drafts)) better = true;
      if (this.offer(this.withCopies(space, drafts, direction))) better = true;
      if (drafts.length > 1 && this.pinned.length === 0 && this.offer(spreadSetups(space, kinds, direction))) better = true;
      if (drafts.length > 1 && this.mayShare(turns) && this.offer(this.pushedApart(space, kinds, next))) better = true;
      if (this.budget.stopped()) break;
    }
    return better;
  }

  /** All kinds in one setup is only worth trying where their labels cover the sheet loosely enough, and where no stamp is missing. */
  private mayShare(turns: Setup['turns']): boolean {
    if (this.pinned.length > 0 || this.kinds.length > MOST_RELAXED) return false;
    const { inner } = this.frame;
    const covered = this.kinds.reduce((sum, kind) => sum + kind.poses[0].leastAreaMm2 * turns, 0) / (inner.w * inner.h);
    const used = new Map<string, number>();
    for (const kind of this.kinds) for (const [id, n] of kind.stamps) used.set(id, (used.get(id) ?? 0) + n);
    return covered < LOOSE && [...used].every(([id, n]) => n <= this.shapes.stamp(id).owned);
  }

  private pushedApart(space: PackingSpace, kinds: readonly Kind[], next: () => number): DraftSetup[] | null {
    for (let start = 0; start < STARTS && !this.budget.stopped(); start++) {
      const placed = relax(space, kinds, next);
      if (placed) return [{ turns: space.turns, placed }];
    }
    return null;
  }

  /** Setups of a draft may each be turned otherwise: a setup that fits once more takes fewer sheets. */
  private withCopies(space: PackingSpace, drafts: DraftSetup[], direction: Direction): DraftSetup[] | null {
    let changed = false;
    const better = drafts.map((draft) => {
      const counts = new Map(draft.placed.map((place) => [place.pose.kind, place.pose.kind.demand]));
      const more = addCopies(space, draft, counts, direction);
      if (more) changed = true;
      return more ?? draft;
    });
    return changed ? better : null;
  }

  private spaces(turns: Setup['turns']): PackingSpace[] {
    let maker = this.makers.get(turns);
    if (!maker) this.makers.set(turns, (maker = obstacleMaker(this.shapes, this.frame, turns)));
    const { order } = this.shapes;
    return cellChoices(order, this.frame, turns).map(({ cells }) => ({ frame: this.frame, turns, maker: maker!, cells, stamps: order.stamps, budget: this.budget }));
  }

  price(drafts: readonly DraftSetup[]): Made {
    const shares = shareCounts(drafts);
    return makePlan(this.shapes, this.frame, drafts.map((draft, i) => toSetupDraft(this.shapes, this.frame, draft, shares[i])));
  }

  private offer(drafts: DraftSetup[] | null): boolean {
    if (!drafts) return false;
    const made = this.price(drafts);
    if (this.best && compareTotals(this.shapes.order.aim, made.totals, this.best.made.totals) >= 0) return false;
    this.best = { drafts, made };
    this.control?.onBest?.(made.totals);
    return true;
  }

  private meetsBounds(): boolean {
    const { totals } = this.best!.made;
    const { aim } = this.shapes.order;
    const least = { ...totals, ...this.atLeast };
    return compareTotals(aim, totals, least) <= 0;
  }
}

const DIRECTIONS: Direction[] = [
  { x: 0.01, y: 1, fromRight: false, fromBottom: false },
  { x: 1, y: 0.01, fromRight: false, fromBottom: false },
  { x: 1, y: 1, fromRight: false, fromBottom: false },
  { x: 0.01, y: 1, fromRight: true, fromBottom: true },
  { x: 1, y: 0.01, fromRight: true, fromBottom: true },
];

/** Orders in which kinds are set: the wanted ones together, the large ones first, then shaken. */
function preference(kinds: readonly Kind[], aim: RunOrder['aim'], round: number, next: () => number): Kind[] {
  const height = (kind: Kind) => Math.min(...kind.poses.map((pose) => pose.labelBox.h));
  const long = (kind: Kind) => Math.max(kind.poses[0].labelBox.w, kind.poses[0].labelBox.h);
  const area = (kind: Kind) => kind.poses[0].labelBox.w * kind.poses[0].labelBox.h;
  const by = (...keys: ((kind: Kind) => number)[]) => [...kinds].sort((a, b) => keys.reduce((d, key) => d || key(b) - key(a), 0) || a.index - b.index);
  const demand = (kind: Kind) => kind.demand;
  const fixed = [() => by(demand, height), () => by(height, area), () => by(demand, area), () => by(area), () => by(long), () => by(demand, long)];
  if (round < fixed.length) return fixed[round]();
  const shaken = new Map(kinds.map((kind) => [kind, (aim === 'time' && round % 2 === 0 ? demand(kind) * 1e4 : 0) + area(kind) * (0.5 + next())]));
  return by((kind) => shaken.get(kind)!);
}

/** Small repeatable generator (mulberry32). */
export function randomFrom(seed: number): () => number {
  let state = seed | 0;
  return () => {
    state = (state + 0x6d2b79f5) | 0;
    let t = Math.imul(state ^ (state >>> 15), 1 | state);
    t = (t + Math.imul(t ^ (t >>> 7), 61 | t)) ^ t;
    return ((t ^ (t >>> 14)) >>> 0) / 4294967296;
  };
}
