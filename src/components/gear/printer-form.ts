import type { Unit } from '../../api/account.ts';
import type { Printer } from '../../api/gear.ts';
import type { GearForm } from './gear-form.ts';
import { named } from './gear-form.ts';

export type PaperChoice = 'letter' | 'a4' | 'square' | 'own';
/** ISO 216 A4; ANSI A letter, 8 1/2 × 11 in; 12 × 12 in of wide-bed printers. */
export const PAPERS: readonly { value: PaperChoice; label: string; widthMm: number; heightMm: number }[] = [
  { value: 'a4', label: 'A4', widthMm: 210, heightMm: 297 },
  { value: 'letter', label: 'Letter', widthMm: 215.9, heightMm: 279.4 },
  { value: 'square', label: '12 × 12 in', widthMm: 304.8, heightMm: 304.8 },
];
type SideKey = 'left' | 'right' | 'top' | 'bottom';
export interface PrinterValues {
  name: string; note: string; paper: PaperChoice; widthMm: number | null; heightMm: number | null;
  unprintable: Record<SideKey, number | null>;
  /** What the ruler says on the printed test page: its bars, level and upright, and its cross from the paper's left and top edge. */
  barX: number | null; barY: number | null; crossX: number | null; crossY: number | null;
}

/** Common practice, no source: home printers reach to 4 mm from three edges and 13 mm from the trailing one. */
const USUAL_EDGES = { left: 4, right: 4, top: 4, bottom: 13 };

function paperChoice(widthMm: number, heightMm: number): PaperChoice {
  return PAPERS.find((paper) => Math.abs(paper.widthMm - widthMm) < 0.01 && Math.abs(paper.heightMm - heightMm) < 0.01)?.value ?? 'own';
}
/** How the test page is drawn: the length of its bars, and where its cross stands. */
export const TEST_BAR_MM = 100;
export const TEST_CROSS_MM = { x: 30, y: 40 };
/** A billionth: far below what a ruler tells, far above what doing sums there and back loses. */
const rounded = (value: number) => Math.round(value * 1e9) / 1e9;

/** From what was measured: scale = bar / its true length; shift = measured − scale · nominal, on each axis. */
export function correction(v: Pick<PrinterValues, 'barX' | 'barY' | 'crossX' | 'crossY'>): Pick<Printer, 'scale' | 'shift'> {
  const scale = { x: (v.barX ?? TEST_BAR_MM) / TEST_BAR_MM, y: (v.barY ?? TEST_BAR_MM) / TEST_BAR_MM };
  const shift = { x: (v.crossX ?? TEST_CROSS_MM.x) - scale.x * TEST_CROSS_MM.x, y: (v.crossY ?? TEST_CROSS_MM.y) - scale.y * TEST_CROSS_MM.y };
  return { scale: { x: rounded(scale.x), y: rounded(scale.y) }, shift: { x: rounded(shift.x), y: rounded(shift.y) } };
}
const measured = ({ scale, shift }: Pick<Printer, 'scale' | 'shift'>) => ({
  barX: rounded(scale.x * TEST_BAR_MM), barY: rounded(scale.y * TEST_BAR_MM),
  crossX: rounded(shift.x + scale.x * TEST_CROSS_MM.x), crossY: rounded(shift.y + scale.y * TEST_CROSS_MM.y),
});
const TRUE = measured({ scale: { x: 1, y: 1 }, shift: { x: 0, y: 0 } });

export const printerForm: GearForm<Printer, PrinterValues> = {
  blank: (unit: Unit) => {
    const paper = PAPERS.find(({ value }) => value === (unit === 'in' ? 'letter' : 'a4'))!;
    return { name: '', note: '', paper: paper.value, widthMm: paper.widthMm, heightMm: paper.heightMm, unprintable: { ...USUAL_EDGES }, ...TRUE };
  },
  fromItem: (p) => ({
    name: p.name, note: p.note, paper: paperChoice(p.paper.widthMm, p.paper.heightMm), widthMm: p.paper.widthMm, heightMm: p.paper.heightMm,
    unprintable: p.unprintable, ...measured(p),
  }),
  check: (v) => ({
    ...named(v),
    ...Object.fromEntries((['widthMm', 'heightMm', 'barX', 'barY', 'crossX', 'crossY'] as const).filter((key) => v[key] === null).map((key) => [key, 'This is needed.'])),
    ...Object.fromEntries((Object.keys(v.unprintable) as SideKey[]).filter((key) => v.unprintable[key] === null).map((key) => [`unprintable.${key}`, 'A length is needed.'])),
  }),
  toBody: (v) => ({
    name: v.name, note: v.note, paper: { widthMm: v.widthMm, heightMm: v.heightMm }, unprintable: v.unprintable,
    ...correction(v),
  }),
  words: (v, length) => [
    ['Name', v.name],
    ['Paper', v.widthMm === null || v.heightMm === null ? 'not complete' : length.showSize(v.widthMm, v.heightMm)],
    ...(Object.entries({ left: 'Left', right: 'Right', top: 'Top', bottom: 'Bottom' }) as [SideKey, string][]).map(([key, label]) => [`${label} edge`, v.unprintable[key] === null ? 'not complete' : length.show(v.unprintable[key])] as [string, string]),
    ['Bars measured', `${length.show(v.barX ?? 0)}, ${length.show(v.barY ?? 0)}`],
    ['Cross measured', `${length.show(v.crossX ?? 0)}, ${length.show(v.crossY ?? 0)}`],
    ['Note', v.note],
  ],
};

export function drawablePrinter(v: PrinterValues): Pick<Printer, 'paper' | 'unprintable' | 'scale' | 'shift'> {
  const { left, right, top, bottom } = v.unprintable;
  return {
    paper: { widthMm: v.widthMm ?? 210, heightMm: v.heightMm ?? 297 }, unprintable: { left: left ?? 0, right: right ?? 0, top: top ?? 0, bottom: bottom ?? 0 },
    ...correction(v),
  };
}
