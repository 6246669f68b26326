import type { Corner, Platform, Side } from '../../api/gear.ts';
import type { GearForm } from './gear-form.ts';
import { named, needed } from './gear-form.ts';
import { usualOpenSides } from './platform-drawing.ts';
import type { DrawnPlatform } from './platform-drawing.ts';

export interface BoxValues { x: number | null; y: number | null; w: number | null; h: number | null }
export interface PlatformValues {
  name: string; note: string; widthMm: number | null; heightMm: number | null; corner: Corner; hinge: Side;
  /** False: as they follow from corner and hinge. */
  ownOpenSides: boolean; openSides: Side[];
  lidSmaller: boolean; lid: BoxValues; keepOuts: BoxValues[];
}

export const SIDES: readonly { value: Side; label: string }[] = [{ value: 'left', label: 'Left' }, { value: 'right', label: 'Right' }, { value: 'top', label: 'Back' }, { value: 'bottom', label: 'Front' }];
export const CORNERS: readonly { value: Corner; label: string }[] = [
  { value: 'top-left', label: 'Back left' }, { value: 'top-right', label: 'Back right' }, { value: 'bottom-left', label: 'Front left' }, { value: 'bottom-right', label: 'Front right' },
];
const labelOf = <V>(choices: readonly { value: V; label: string }[], value: V) => choices.find((choice) => choice.value === value)?.label ?? '';

export const emptyBox = (): BoxValues => ({ x: 0, y: 0, w: 20, h: 10 });
const whole = (box: BoxValues): box is { x: number; y: number; w: number; h: number } => box.x !== null && box.y !== null && box.w !== null && box.h !== null;

function boxProblem(box: BoxValues, bed: { widthMm: number | null; heightMm: number | null }, what: string): string | null {
  if (!whole(box)) return `${what} needs all four lengths.`;
  if (box.w <= 0 || box.h <= 0) return `${what} needs a width and a height above 0.`;
  if (box.x + box.w > (bed.widthMm ?? Infinity) + 1e-6 || box.y + box.h > (bed.heightMm ?? Infinity) + 1e-6) return `${what} reaches past the bed.`;
  return null;
}

export const platformForm: GearForm<Platform, PlatformValues> = {
  blank: () => ({ name: '', note: '', widthMm: null, heightMm: null, corner: 'top-left', hinge: 'left', ownOpenSides: false, openSides: [], lidSmaller: false, lid: { x: null, y: null, w: null, h: null }, keepOuts: [] }),
  fromItem: (p) => ({
    name: p.name, note: p.note, widthMm: p.widthMm, heightMm: p.heightMm, corner: p.corner, hinge: p.hinge,
    ownOpenSides: p.openSides !== null, openSides: p.openSides ?? [], lidSmaller: p.lid !== null, lid: p.lid ?? { x: null, y: null, w: null, h: null }, keepOuts: p.keepOuts,
  }),
  check: (v) => ({
    ...named(v),
    ...needed({ ...v }, ['widthMm', 'heightMm'], 'A length is needed.'),
    ...(v.lidSmaller ? problemAt('lid', boxProblem(v.lid, v, 'The lid area')) : {}),
    ...Object.assign({}, ...v.keepOuts.map((box, i) => problemAt(`keepOuts.${i}`, boxProblem(box, v, `Keep-out ${i + 1}`)))),
  }),
  toBody: (v) => ({
    name: v.name, note: v.note, widthMm: v.widthMm, heightMm: v.heightMm, corner: v.corner, hinge: v.hinge,
    openSides: v.ownOpenSides ? v.openSides : null, lid: v.lidSmaller ? v.lid : null, keepOuts: v.keepOuts,
  }),
  words(v, length) {
    const size = (box: BoxValues) => (whole(box) ? `${length.showSize(box.w, box.h)} at ${length.show(box.x)}, ${length.show(box.y)}` : 'not complete');
    return [
      ['Name', v.name],
      ['Bed', v.widthMm === null || v.heightMm === null ? 'not complete' : length.showSize(v.widthMm, v.heightMm)],
      ['Corner', labelOf(CORNERS, v.corner)],
      ['Hinge', labelOf(SIDES, v.hinge)],
      ['Open sides', (v.ownOpenSides ? v.openSides : usualOpenSides(v.corner, v.hinge)).map((side) => labelOf(SIDES, side)).join(', ') || 'none'],
      ['Lid area', v.lidSmaller ? size(v.lid) : 'the whole bed'],
      ['Keep-outs', v.keepOuts.map(size).join('; ') || 'none'],
      ['Note', v.note],
    ];
  },
};

function problemAt(path: string, problem: string | null): Record<string, string> {
  return problem === null ? {} : { [path]: problem };
}

/** What can already be drawn of what has been typed. */
export function drawable(v: PlatformValues): DrawnPlatform {
  return {
    widthMm: v.widthMm ?? 150, heightMm: v.heightMm ?? 150, corner: v.corner, hinge: v.hinge, openSides: v.ownOpenSides ? v.openSides : null,
    lid: v.lidSmaller && whole(v.lid) ? v.lid : null, keepOuts: v.keepOuts.map((box) => (whole(box) ? box : { x: 0, y: 0, w: 0, h: 0 })),
  };
}
