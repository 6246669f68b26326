/**
 * Die sheets: the stamped sheet as it lay at turn 0, with the labels of all turns in it; one page for each kind of cut pass. Face up it reads as the sheet
 * does; face down it is mirrored left to right, to lay dies on and the sheet, face down, on them.
 *
 * Sheets that carry the same labels and are cut by the same dies share a page, which names them all. Sheet coordinates, mm.
 */
import type { CutPass } from '../gangrun/types.ts';
import { impressionAngle, impressionPlace } from '../gangrun/sheet-frame.ts';
import { boxCentre, outlineBox } from '../geometry/ring.ts';
import { mapOutline, rotatePoint } from '../geometry/transform.ts';
import type { Box, Point } from '../geometry/types.ts';
import { formatLength } from '../geometry/units.ts';
import { cornerItems, cutLineItem, inkItems, mirrored, mirroredBox, numberPlace } from './bed-drawing.ts';
import { FIRM_MM, grownBox, HAIR_MM, INK, line, path, polyline, rect, style, words } from './page-items.ts';
import { drawingPages } from './page-layout.ts';
import type { LabelShape, PlaceShapes } from './plan-shapes.ts';
import { dieName, ranges } from './template-context.ts';
import type { SetupContext } from './template-context.ts';
import type { PageDescription, PageItem } from './types.ts';

interface MadeLabel { placement: number; turn: number; lineId: string }
export interface CutGroup {
  /** Which pass of how many of each of these sheets; 0 of 0 where nothing is die cut. */
  pass: number;
  passes: number;
  sheets: number[];
  made: MadeLabel[];
  cut: CutPass | null;
}

/** Kinds of cut passes, in the order of work. */
export function cutGroups({ plan, setup }: SetupContext): CutGroup[] {
  const groups = new Map<string, CutGroup>();
  const sheets = [...new Set(setup.presses.map((press) => press.sheet))];
  for (const sheet of sheets) {
    const made = setup.presses.filter((press) => press.sheet === sheet).flatMap((press) => press.inked.map((inked) => ({ ...inked, turn: press.turn })));
    const passes = plan.cutPasses.filter((pass) => pass.sheet === sheet);
    const cuts: (CutPass | null)[] = passes.length === 0 ? [null] : passes;
    cuts.forEach((cut, i) => {
      const key = JSON.stringify([made, passes.length, i, cut && [cut.strip, cut.cuts]]);
      const group = groups.get(key);
      if (group) group.sheets.push(sheet);
      else groups.set(key, { pass: cut ? i + 1 : 0, passes: passes.length, sheets: [sheet], made, cut });
    });
  }
  return [...groups.values()].sort((a, b) => a.sheets[0] - b.sheets[0] || a.pass - b.pass);
}

/** What one page serves: the fullest pass, and those that cut a part of the same labels. */
export interface SharedPage { fullest: CutGroup; groups: { group: CutGroup; /** Of the labels cut in the fullest pass. */ without: MadeLabel[] }[] }

/** A sheet from which labels are missing, because their count was reached, is laid on the page of a full one. */
export function sharedPages(groups: readonly CutGroup[]): SharedPage[] {
  const shared: SharedPage[] = [];
  const inOrder = [...groups].sort((a, b) => b.made.length - a.made.length || (b.cut?.cuts.length ?? 0) - (a.cut?.cuts.length ?? 0));
  for (const group of inOrder) {
    const cuts = cutKeys(group), made = new Set(group.made.map(labelKey));
    const page = shared.find(({ fullest }) => {
      if (fullest.cut?.strip !== group.cut?.strip || (fullest.cut === null) !== (group.cut === null)) return false;
      const whole = cutKeys(fullest), all = new Set(fullest.made.map(labelKey));
      // A label of another pass may not look as if it were cut in this one.
      return [...made].every((key) => all.has(key) && whole.has(key) === cuts.has(key));
    });
    if (!page) shared.push({ fullest: group, groups: [{ group, without: [] }] });
    else page.groups.push({ group, without: page.fullest.made.filter((label) => cutKeys(page.fullest).has(labelKey(label)) && !cuts.has(labelKey(label))) });
  }
  for (const page of shared) page.groups.sort((a, b) => a.group.sheets[0] - b.group.sheets[0]);
  return shared.sort((a, b) => a.groups[0].group.sheets[0] - b.groups[0].group.sheets[0] || a.groups[0].group.pass - b.groups[0].group.pass);
}

function labelKey({ placement, turn, lineId }: MadeLabel): string {
  return `${placement} ${turn} ${lineId}`;
}

function cutKeys({ cut }: CutGroup): Set<string> {
  return new Set(cut?.cuts.map(labelKey) ?? []);
}

export function diePages(context: SetupContext, face: 'up' | 'down'): PageDescription[] {
  const { order: { sheet }, number } = context;
  return sharedPages(cutGroups(context)).flatMap((page) => {
    const items = sheetItems(context, page.fullest);
    const box = { x: 0, y: 0, w: sheet.widthMm, h: sheet.heightMm };
    const head = {
      name: `Setup ${number}: dies face ${face}, ${pageName(page)}`, side: context.side,
      heading: face === 'up' ? 'Dies, sheet face up' : 'Dies, sheet face down (mirrored)', notes: notesOf(context, page, face),
    };
    const regions: Box[] = [grownBox(box, 7), grownBox(box, 3.2)];
    return face === 'up' ? drawingPages(context, head, items, regions)
      : drawingPages(context, head, mirrored(items, 'x', sheet.widthMm), regions.map((region) => mirroredBox(region, 'x', sheet.widthMm)));
  });
}

function pageName({ groups }: SharedPage): string {
  const sheets = groups.flatMap(({ group }) => group.sheets).sort((a, b) => a - b);
  const named = `${sheets.length === 1 ? 'sheet' : 'sheets'} ${ranges(sheets)}`;
  const passes = new Set(groups.map(({ group }) => `${group.pass} of ${group.passes}`));
  return groups[0].group.pass === 0 ? named : `${named}, cut pass ${passes.size === 1 ? [...passes][0] : groups[0].group.pass}`;
}

function notesOf(context: SetupContext, page: SharedPage, face: 'up' | 'down'): string[] {
  const { setup } = context;
  const group = page.fullest;
  const how = face === 'up'
    ? 'Hold the stamped sheet to the light over this page, or follow it as a picture. Firm lines: dies of this pass. Pale lines: cut in another pass.'
    : 'Lay the dies on this page, edges up, on the firm lines; lay the stamped sheet face down on them, its edges on the edges drawn. Pale lines: cut in another pass.';
  const name = pageName(page);
  return [
    `${name[0].toUpperCase()}${name.slice(1)}. ${how}`,
    ...leftOutWords(context, page),
    ...(group.cut && setup.stripCuts.length > 0 ? [`First cut the sheet along the dashed lines; this pass takes piece ${group.cut.strip + 1} of ${setup.stripCuts.length + 1}, counted from the ${setup.stripCuts[0].axis === 'x' ? 'left' : 'top'} of the sheet face up.`] : []),
    ...(setup.turns > 1 ? ['The small arrow at each number points to the top of its label; t1, t2 … is the turn in which it was stamped.'] : []),
    ...(group.cut ? [] : ['Nothing on it is cut by a die.']),
  ];
}

/** One sentence for the sheets that are not full. */
function leftOutWords({ setup }: SetupContext, { groups }: SharedPage): string[] {
  const parts = groups.filter(({ without }) => without.length > 0).map(({ group, without }) => {
    const labels = without.map(({ placement, turn }) => `${setup.placements.findIndex((p) => p.id === placement) + 1}${setup.turns > 1 ? ` t${turn + 1}` : ''}`);
    return `${group.sheets.length === 1 ? 'sheet' : 'sheets'} ${ranges(group.sheets)} without ${labels.join(', ')}`;
  });
  return parts.length === 0 ? [] : [`Leave out what a sheet does not have: ${parts.join('; ')}.`];
}

function sheetItems(context: SetupContext, group: CutGroup): PageItem[] {
  const { order: { sheet, platform }, setup } = context;
  const places = new Map(context.places.map((place) => [place.placement.id, place]));
  const box = { x: 0, y: 0, w: sheet.widthMm, h: sheet.heightMm };
  const cut = new Map(group.cut?.cuts.map((c) => [`${c.placement} ${c.turn} ${c.lineId}`, c]) ?? []);
  return [
    rect(box, 'trim-line', style.trim),
    ...cornerItems(box, platform.corner ?? 'top-left', 'corner at the first press'),
    ...stripCutItems(context),
    ...group.made.flatMap((made) => {
      const place = places.get(made.placement);
      const label = place?.labels.find((l) => l.lineId === made.lineId);
      if (!place || !label) throw new RangeError(`Setup ${context.index} presses line ${JSON.stringify(made.lineId)} at place ${made.placement}, which it does not have.`);
      const now = cut.get(`${made.placement} ${made.turn} ${made.lineId}`);
      return labelItems(context, place, label, made.turn, now === undefined ? null : { name: dieName(context, now.dieId), copy: now.dieCopy });
    }),
    ...(setup.placements.length === 0 ? [words({ x: 4, y: 8 }, 'No labels.', 3)] : []),
  ];
}

function labelItems(context: SetupContext, place: PlaceShapes, label: LabelShape, turn: number, die: { name: string; copy: number } | null): PageItem[] {
  const { setup: { turns }, frame } = context;
  const onSheet = (p: Point): Point => {
    const there = impressionPlace(p, turn, turns, frame.centre);
    return { x: there.x - frame.sheet.x, y: there.y - frame.sheet.y };
  };
  const shape = { ...label, outline: mapOutline(label.outline, onSheet) };
  const bodies = place.pieces.map((piece) => piece.body.map(onSheet));
  const corner = numberPlace(shape, bodies);
  // Words and arrow run from the corner inwards.
  const inwards = corner.x < boxCentre(outlineBox(shape.outline)).x ? 1 : -1;
  const at = turns > 1 ? { x: corner.x + inwards * 1.5, y: corner.y } : corner;
  const owned = context.order.dies.find((d) => d.id === label.dieId)?.owned ?? 1;
  const line1 = turns > 1 ? `${place.number} t${turn + 1}` : `${place.number}`;
  return [
    die === null ? { ...cutLineItem(shape), role: label.cut === 'die' ? 'cut-line-other' : 'cut-line' } : path(shape.outline.rings, 'cut-line', style.cutNow),
    // Ink of the other passes would only hide which labels are meant.
    ...(die === null ? [] : place.pieces.flatMap((piece) => inkItems({ ink: mapOutline(piece.roughInk, onSheet) }, context.labels.sentiments[piece.stampId]?.boxOnly === true))),
    words({ x: at.x, y: at.y + 1 }, line1, 3.2, 'number', { align: 'middle', bold: die !== null }),
    ...(turns > 1 ? upArrow({ x: at.x + inwards * 5.2, y: at.y }, impressionAngle(turn, turns)) : []),
    ...(die === null ? [] : [words({ x: at.x, y: at.y + 3.6 }, owned > 1 ? `${die.name} (${die.copy})` : die.name, 2, 'caption', { align: 'middle' })]),
  ];
}

function upArrow(at: Point, angleDeg: number): PageItem[] {
  const turned = (x: number, y: number): Point => {
    const p = rotatePoint({ x, y }, angleDeg);
    return { x: at.x + p.x, y: at.y + p.y };
  };
  return [polyline([[turned(0, 1.5), turned(0, -1.5)], [turned(-0.8, -0.6), turned(0, -1.5), turned(0.8, -0.6)]], 'turn-arrow', { strokeMm: FIRM_MM / 2, stroke: INK })];
}

export function stripCutItems({ order: { sheet }, setup, unit }: SetupContext): PageItem[] {
  return setup.stripCuts.flatMap(({ axis, atMm }, i): PageItem[] => {
    const look = { strokeMm: HAIR_MM * 2, stroke: INK, dashMm: [5, 2] };
    const at = axis === 'x' ? { x: atMm + 0.8, y: sheet.heightMm - 1.2 } : { x: 1.2, y: atMm - 0.8 };
    return [
      axis === 'x' ? line(atMm, 0, atMm, sheet.heightMm, 'strip-cut', look) : line(0, atMm, sheet.widthMm, atMm, 'strip-cut', look),
      words(at, `cut ${i + 1}: ${formatLength(atMm, unit, { decimals: 2 })}`, 2.2, 'caption'),
    ];
  });
}
