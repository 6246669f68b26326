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
}
export interface TemplateOptions {
  pages: ('placing' | 'lid' | 'dies-face-up' | 'dies-face-down' | 'sheet-cut' | 'ticket')[];
  printer: PrinterProfile;
  unit: 'mm' | 'in';
  title: string;
  /** Default all. */
  setups?: number[];
  cutPlan?: CutPlan;
  /** Names, colours, words and such that the plan does not hold. */
  labels: unknown;
}
/** Page descriptions in mm, which the SVG preview and the PDF both draw. */
export interface PageDocument { title: string; pages: { name: string; widthMm: number; heightMm: number; items: PageItem[] }[] }
export type PageItem =
  | { kind: 'path'; rings: Ring[]; closed: boolean; strokeMm?: number; stroke?: string; fill?: string; dashMm?: number[]; role: string }
  | { kind: 'text'; at: Point; text: string; sizeMm: number; align: 'left' | 'middle' | 'right'; bold?: boolean; turnDeg?: number; role: string };
