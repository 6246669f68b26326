import type { CutPlan } from '../cutplan/types.ts';
import type { Point, Ring } from '../geometry/types.ts';

export interface PrinterProfile {
  paper: { widthMm: number; heightMm: number };
  unprintable: { left: number; right: number; top: number; bottom: number };
  /**
   * From the printed test page. Origin: the paper's top left. printed = scale · drawn + shift, so drawn = (wanted − shift) / scale, each axis, applied last,
   * after mirroring and tiling; from the test cross, shift = measured − scale · nominal.
   */
  scale: { x: number; y: number };
  shift: { x: number; y: number };
  /** Printed on every page, so that a page is used with the printer that it was made for. */
  name?: string;
}

export type TemplatePage = 'placing' | 'lid' | 'dies-face-up' | 'dies-face-down' | 'sheet-cut' | 'ticket';

export interface TemplateOptions {
  pages: TemplatePage[];
  printer: PrinterProfile;
  unit: 'mm' | 'in';
  title: string;
  /** Counted from 0; default all. */
  setups?: number[];
  cutPlan?: CutPlan;
  /** TemplateLabels; read by readLabels, which leaves out what it cannot use. */
  labels: unknown;
}

/** Names, colours, words and such that a plan does not hold, by the ids of the order. All may be missing. */
export interface TemplateLabels {
  batchName?: string;
  cardstockName?: string;
  /** Wins over the printer profile's own. */
  printerName?: string;
  /** boxOnly: its size was typed, so that its artwork is a plain box; the pages say so. */
  sentiments: Record<string, { name?: string; words?: string; boxOnly?: boolean }>;
  dies: Record<string, { name?: string }>;
  inks: Record<string, { name?: string; /** #rrggbb */ colour?: string; kind?: string; dryingMinutes?: number }>;
  lines: Record<string, { title?: string }>;
  /** Address of the bench; `{setup}` in it is replaced by the setup's number, else `setup=…` is added to its query. */
  benchUrl?: string;
  /** The stock sheet that a cut plan cuts. */
  stock?: { widthMm: number; heightMm: number };
  /** Number of the first setup, where the plan is one of several runs of a batch; default 1. */
  firstSetupNumber?: number;
}

/**
 * What an item is, for whoever draws or measures a page:
 * `cut-line` of a label (`cut-line-other`: of one that is cut in another pass) · `ink` outline · `body` of a stamp · `baseline-tick`, `centre-tick` ·
 * `keep-out` · `bed-edge`, `lid-edge`, `sheet-edge` · `trim-line` where scissors go · `corner` where the sheet is pushed · `hinge` ·
 * `strip-cut`, `sheet-cut`, `stock-edge` · `scale-bar`, `scale-tick` · `join-mark` of tiles · `number` in the order of work · `swatch`, `ink-name` ·
 * `turn-arrow` · `qr` · `tick-box` · `rule` of a table · `margin-frame`, `test-cross`, `card` (ISO/IEC 7810 ID-1) of the printer test page ·
 * `die` of the check sheet · `marker` of the photo page · words: `heading`, `words`, `caption`.
 */
export type PageRole =
  | 'cut-line' | 'cut-line-other' | 'ink' | 'body' | 'baseline-tick' | 'centre-tick' | 'keep-out' | 'bed-edge' | 'lid-edge' | 'sheet-edge' | 'trim-line'
  | 'corner' | 'hinge' | 'strip-cut' | 'sheet-cut' | 'stock-edge' | 'scale-bar' | 'scale-tick' | 'join-mark' | 'number' | 'swatch' | 'ink-name'
  | 'turn-arrow' | 'qr' | 'tick-box' | 'rule' | 'margin-frame' | 'test-cross' | 'card' | 'die' | 'marker' | 'heading' | 'words' | 'caption';

export interface PagePath {
  kind: 'path';
  /** Filled even-odd. */
  rings: Ring[];
  closed: boolean;
  /** Width of the line; its middle is on the ring. None: not stroked. */
  strokeMm?: number;
  stroke?: string;
  fill?: string;
  dashMm?: number[];
  role: PageRole;
}
export interface PageText {
  kind: 'text';
  /** On the baseline: its left end, middle or right end. */
  at: Point;
  text: string;
  sizeMm: number;
  align: 'left' | 'middle' | 'right';
  bold?: boolean;
  /** Clockwise about `at`. */
  turnDeg?: number;
  role: PageRole;
}
export type PageItem = PagePath | PageText;
export interface PageDescription { name: string; widthMm: number; heightMm: number; items: PageItem[] }
/** Page descriptions in mm, which the SVG preview and the PDF both draw. */
export interface PageDocument { title: string; pages: PageDescription[] }
