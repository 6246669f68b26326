import type { DieGeometry } from '../fit/types.ts';
import type { Box, Outline, Point, Side } from '../geometry/types.ts';

/** One cardstock, one sheet size. A batch with several cardstocks is several orders, planned one by one. */
export interface RunOrder {
  sheet: { widthMm: number; heightMm: number; marginMm: number };
  platform: Platform;
  /** Least distance between the hulls of two cut lines on a sheet. */
  gapMm: number;
  /** Added to gapMm between labels made in different turns of the sheet: it never lies twice in exactly the same place. */
  turnToleranceMm: number;
  /** Widest piece that the die-cutting machine takes. */
  maxFeedWidthMm?: number;
  /** Physical stamps. Body = convex hull of the ink, grown by trimMm; two bodies may touch, not overlap, between pieces of one line too. */
  stamps: { id: string; artwork: Outline; trimMm: number; owned: number }[];
  dies: { id: string; geometry: DieGeometry; owned: number }[];
  /**
   * clearMm: room that a pad needs. Where the inks of all lines at two places together are more than one, the convex hulls of their ink stand
   * at least the largest clearMm of those inks apart, throughout the setup. Not asked between pieces of one line; fitting warns there.
   */
  inks: { id: string; clearMm: number }[];
  lines: RunLine[];
  turns: 'auto' | 'none' | 'half' | 'quarter';
  aim: 'time' | 'sheets';
  pace?: Pace;
  /** Setup counted from 0; id, stamps, x, y, rotationDeg are kept to the last digit, lineIds may gain lines of the same stamps. A pin that cannot stand makes its lines unplaced. */
  pinned?: { setup: number; placement: Placement }[];
  /** Multiplies the number of search steps; default 1. Never a time: the same order gives the same plan on every machine of one Node major version. More effort is never worse. */
  effort?: number;
  seed: number;
}

export interface Platform {
  /** Bed under the lid, origin at its top left. */
  widthMm: number; heightMm: number;
  /** In bed coordinates: magnets, clips, anything that a stamp cannot stand on. */
  keepOuts: Box[];
  /** The corner the sheet is pushed into; default top-left. */
  corner?: 'top-left' | 'top-right' | 'bottom-left' | 'bottom-right';
  /** Default left. */
  hinge?: Side;
  /** Sides over which a sheet may hang; default: those away from the corner, less the hinge's. */
  openSides?: Side[];
  /** Where stamps hold on the lid, in bed coordinates; default the whole bed. */
  lid?: Box;
}

/** A kind of label: what is stamped in it, what cuts it, how many. */
export interface RunLine {
  id: string;
  /** The stamps that make it: one for most, several for a combined sentiment. Places in the box of the die's cut line, as Fit gives them. */
  pieces: { stampId: string; centre: Point; rotationDeg: number; inkId: string }[];
  dieId: string;
  /** Default 'die'. Otherwise dieId names an outline that needs no owned die: the label keeps its gap on the sheet but has no place in cutPasses or their bounds. */
  cut?: 'die' | 'straight' | 'none';
  /** Wanted on cards. */
  quantity: number;
  /** Made on top, for spoilt ones. */
  overs: number;
  /** False: label angle 0 (180 is turned). True: any label angle. */
  mayTurn: boolean;
}

/** One place on the bed in one setup: physical stamps that stay there until the setup is done or they are taken off. */
export interface Placement {
  /** Unique in the setup. */
  id: number;
  /** In the order of the lines' pieces; copy is 1 to owned. No copy stands at two places of a setup. */
  stamps: { stampId: string; copy: number }[];
  /** Lines made here, by other dies or in other inks. All their ink coincides within 0.05 mm. */
  lineIds: string[];
  /**
   * Bed coordinates of the centre of the first stamp's (unturned) ink box, and that stamp's turn. The ink stands; each line's die lies around it:
   * its label angle is rotationDeg − pieces[0].rotationDeg, and a point q in the cut line's box lies at (x, y) + R(label angle) · (q − pieces[0].centre), R clockwise.
   */
  x: number; y: number; rotationDeg: number;
}

export interface Setup {
  /** 1, 2 (half turns) or 4 (quarter turns, square sheet): impressions of every placement that a sheet can take. */
  turns: 1 | 2 | 4;
  placements: Placement[];
  /**
   * Straight cuts across the sheet as it lies at turn 0, in sheet coordinates, made before die cutting where its shorter side is wider than the machine's feed.
   * Axis 'x': along the line x = atMm, top to bottom. All of a setup have one axis; no cut line of any turn is crossed; each piece's shorter side ≤ maxFeedWidthMm.
   */
  stripCuts: { axis: 'x' | 'y'; atMm: number }[];
  /** In the order they are made. */
  presses: Press[];
}
/** One closing of the lid. */
export interface Press {
  /** Numbered from 1 through the whole plan; a sheet belongs to one setup. */
  sheet: number;
  /** 0 … turns − 1: the sheet lies turned clockwise by turn · 360° / turns in the same corner. */
  turn: number;
  /** Placements whose stamps are finished and leave the lid before this press: each once, in the first press after its last. */
  takeOff: number[];
  /** Every placement still on the lid that makes a label now; the others stay un-inked. */
  inked: { placement: number; lineId: string }[];
}
/** One run through the die-cutting machine: one piece of one sheet. Dies, rims included, do not overlap; no die more often than owned. */
export interface CutPass {
  sheet: number;
  /** Which piece between the strip cuts, from 0, counted from the left or the top. */
  strip: number;
  cuts: { dieId: string; dieCopy: number; placement: number; turn: number; lineId: string }[];
}

export interface RunTotals { setups: number; presses: number; sheets: number; cutPasses: number; minutes: number; wastePercent: number }

export interface RunPlan {
  setups: Setup[];
  /** Every label made is cut exactly once. */
  cutPasses: CutPass[];
  totals: RunTotals;
  /**
   * Proven lower bounds for the lines that could be placed, each on its own, for this order's turns and pins. A line's count may be spread over several
   * setups, and a stamp may stand in several: a bound must hold for such plans too.
   */
  atLeast: { setups: number; presses: number; sheets: number; cutPasses: number; minutes: number };
  /** Codes: label-too-large, ink-off-lid, no-die, no-stamp, sheet-does-not-lie, turns-impossible, pieces-overlap, pin-conflict, nothing-wanted. Faults of the sheet or the turns make every line unplaced; never fewer turns than asked. */
  unplaced: { lineId: string; code: string; message: string }[];
  /** Stopped by control.stop: a true plan, though perhaps not the best. */
  stopped: boolean;
}
/** wastePercent = 100 · (1 − areas of the labels made / (sheets · sheet area)). Minutes: a setup's time = setup + perStamp · stamps on the lid; a press = press + perInked · stamps inked; a cut pass = cutPass. */
export interface Pace { setup: number; perStamp: number; press: number; perInked: number; cutPass: number } // default 4, 1/3, 1/2, 8/60, 3/4

export interface LayoutFault {
  kind: 'labels-near' | 'stamps-touch' | 'inks-near' | 'off-sheet' | 'off-bed' | 'keep-out' | 'feed-width';
  setup: number;
  /** One or two; turn 0 where it is about stamps; none for feed-width. */
  between: { placement: number; turn: number }[];
  /** Required − distance, an overlap counting as minus the least shift that parts them; for feed-width the excess of the best set of cuts' widest piece. Under 0.01 mm is no fault. */
  missingMm: number;
}
