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
  /** In percent, as the test page gives them; 100 is true. */
  scaleX: number | null; scaleY: number | null; shiftX: number | null; shiftY: number | null;
}

/** Common practice, no source: home printers reach to 4 mm from three edges and 13 mm from the trailing one. */
const USUAL_EDGES = { left: 4, right: 4, top: 4, bottom: 13 };

function paperChoice(widthMm: number, heightMm: number): PaperChoice {
  return PAPERS.find((paper) => Math.abs(paper.widthMm - widthMm) < 0.01 && Math.abs(paper.heightMm - heightMm) < 0.01)?.value ?? 'own';
}
/** A millionth: a scale typed as 99.7 % must not come back as 99.69999999999999 %. */
const percent = (scale: number) => Math.round(scale * 1e6) / 1e4;

export const printerForm: GearForm<Printer, PrinterValues> = {
  blank: (unit: Unit) => {
    const paper = PAPERS.find(({ value }) => value === (unit === 'in' ? 'letter' : 'a4'))!;
    return { name: '', note: '', paper: paper.value, widthMm: paper.widthMm, heightMm: paper.heightMm, unprintable: { ...USUAL_EDGES }, scaleX: 100, scaleY: 100, shiftX: 0, shiftY: 0 };
  },
  fromItem: (p) => ({
    name: p.name, note: p.note, paper: paperChoice(p.paper.widthMm, p.paper.heightMm), widthMm: p.paper.widthMm, heightMm: p.paper.heightMm,
    unprintable: p.unprintable, scaleX: percent(p.scale.x), scaleY: percent(p.scale.y), shiftX: p.shift.x, shiftY: p.shift.y,
  }),
  check: (v) => ({
    ...named(v),
    ...Object.fromEntries((['widthMm', 'heightMm', 'scaleX', 'scaleY', 'shiftX', 'shiftY'] as const).filter((key) => v[key] === null).map((key) => [key, 'This is needed.'])),
    ...Object.fromEntries((Object.keys(v.unprintable) as SideKey[]).filter((key) => v.unprintable[key] === null).map((key) => [`unprintable.${key}`, 'A length is needed.'])),
  }),
  toBody: (v) => ({
    name: v.name, note: v.note, paper: { widthMm: v.widthMm, heightMm: v.heightMm }, unprintable: v.unprintable,
    scale: { x: (v.scaleX ?? 100) / 100, y: (v.scaleY ?? 100) / 100 }, shift: { x: v.shiftX, y: v.shiftY },
  }),
  words: (v, length) => [
    ['Name', v.name],
    ['Paper', v.widthMm === null || v.heightMm === null ? 'not complete' : length.showSize(v.widthMm, v.heightMm)],
    ...(Object.entries({ left: 'Left', right: 'Right', top: 'Top', bottom: 'Bottom' }) as [SideKey, string][]).map(([key, label]) => [`${label} edge`, v.unprintable[key] === null ? 'not complete' : length.show(v.unprintable[key])] as [string, string]),
    ['Scale', `${v.scaleX} % × ${v.scaleY} %`],
    ['Shift', `${length.show(v.shiftX ?? 0)}, ${length.show(v.shiftY ?? 0)}`],
    ['Note', v.note],
  ],
};

export function drawablePrinter(v: PrinterValues): Pick<Printer, 'paper' | 'unprintable' | 'scale' | 'shift'> {
  const { left, right, top, bottom } = v.unprintable;
  return {
    paper: { widthMm: v.widthMm ?? 210, heightMm: v.heightMm ?? 297 }, unprintable: { left: left ?? 0, right: right ?? 0, top: top ?? 0, bottom: bottom ?? 0 },
    scale: { x: (v.scaleX ?? 100) / 100, y: (v.scaleY ?? 100) / 100 }, shift: { x: v.shiftX ?? 0, y: v.shiftY ?? 0 },
  };
}
