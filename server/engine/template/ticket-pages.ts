/**
 * The run ticket: all that is needed at the table in one setup, on one page. Its words shrink, down to a limit, before it takes a second page.
 *
 * Presses of sheets that are pressed alike share rows, with one box to tick for each sheet; the numbers are those of the placing and the lid sheet.
 */
import type { Press } from '../gangrun/types.ts';
import { formatLength } from '../geometry/units.ts';
import { cautionOf, MAKERS_FIRST } from './cautions.ts';
import { cutGroups } from './die-pages.ts';
import { path, style, words } from './page-items.ts';
import { finishedPage, pageLayout } from './page-layout.ts';
import { benchAddress, isLoopback, qrRings, QUIET_MODULES } from './qr.ts';
import { dieName, inkName, inkLetters, inksOf, ranges, stampName, swatchesOf } from './template-context.ts';
import type { SetupContext } from './template-context.ts';
import { flowed, headingBlock, tableBlocks, textBlock } from './ticket-blocks.ts';
import type { Block, Cell } from './ticket-blocks.ts';
import { turnNote } from './bed-pages.ts';
import { wrapText } from './text-width.ts';
import type { PageDescription, PageItem } from './types.ts';

/** Words of 1.7 mm are as small as small print on a ruler. */
const SCALES = [1, 0.92, 0.85, 0.78, 0.7, 0.63];
const QR_MM = 24;
/** A quiet zone of 4 modules at 25 or more modules a side. */
const QR_ROOM_MM = QR_MM * (1 + (2 * QUIET_MODULES) / 25);

export function ticketPages(context: SetupContext): PageDescription[] {
  const name = `Setup ${context.number}: run ticket`;
  const head = { name, heading: 'Run ticket', side: context.side, swatches: swatchesOf(context) };
  const { body } = pageLayout(context, head);
  let pages: Block[][] = [];
  for (const scale of SCALES) {
    pages = flowed(ticketBlocks(context, body.w, scale), body.h);
    if (pages.length === 1) break;
  }
  return pages.map((blocks, i) => {
    const pageName = i === 0 ? name : `${name}, page ${i + 1}`;
    const layout = pageLayout(context, { ...head, name: pageName, ...(pages.length > 1 ? { side: `${context.side}, page ${i + 1} of ${pages.length}` } : {}) });
    let y = layout.body.y;
    const items = blocks.flatMap((block) => {
      const drawn = block.draw(layout.body.x, y);
      y += block.heightMm;
      return drawn;
    });
    return finishedPage(context, pageName, [...layout.items, ...items]);
  });
}

function ticketBlocks(context: SetupContext, width: number, scale: number): Block[] {
  const cuts = cutRows(context);
  return [
    summaryBlock(context, width),
    headingBlock('What stands where', scale),
    ...tableBlocks([
      { title: 'No.', share: 5, bold: true }, { title: 'Stamp', share: 34 }, { title: 'Die', share: 20 }, { title: `x (${context.unit})`, share: 10 },
      { title: `y (${context.unit})`, share: 10 }, { title: 'turn', share: 8 }, { title: 'ink', share: 6, bold: true }, { title: 'labels', share: 8 },
    ], placeRows(context), width, scale),
    headingBlock('Presses, in this order', scale),
    ...tableBlocks([
      { title: 'sheet, tick when pressed', share: 30 }, { title: 'turn', share: 12 }, { title: 'take off first', share: 13 }, { title: 'ink and press', share: 34, bold: true },
      { title: 're-stamped', share: 16 }, { title: 'note', share: 20 },
    ], pressRows(context), width, scale),
    ...(cuts.length === 0 ? [] : [
      headingBlock('Cut passes', scale),
      ...tableBlocks([{ title: 'sheet, tick when cut', share: 30 }, { title: 'pass', share: 12 }, { title: 'dies over labels', share: 83 }], cuts, width, scale),
    ]),
    headingBlock('Mind', scale),
    ...notes(context).map((text) => textBlock(text, width, scale, true)),
  ];
}

function summaryBlock(context: SetupContext, width: number): Block {
  const { labels, setup, plan, number, order: { sheet } } = context;
  const sheets = [...new Set(setup.presses.map((press) => press.sheet))];
  const made = setup.presses.reduce((sum, press) => sum + press.inked.length, 0);
  const url = labels.benchUrl === undefined ? undefined : benchAddress(labels.benchUrl, number);
  const textWidthMm = width - (url === undefined ? 0 : QR_ROOM_MM + 4);
  const lines = [
    ...(labels.batchName === undefined ? [] : [{ text: labels.batchName, bold: true }]),
    ...[
      `${count(setup.placements.length, 'place')}, ${count(setup.presses.length, 'press', 'presses')} on ${count(sheets.length, 'sheet')}${sheets.length > 0 ? ` (${ranges(sheets)} of ${plan.totals.sheets})` : ''}: ${count(made, 'label')}.`,
      `Sheets ${formatLength(sheet.widthMm, context.unit)} × ${formatLength(sheet.heightMm, context.unit)}${labels.cardstockName === undefined ? '' : `, ${labels.cardstockName}`}.`,
      ...turnNote(setup.turns),
      ...(url === undefined ? [] : [isLoopback(url)
        ? `The code opens the bench at this setup, but only on the machine that made this page: a phone cannot open ${url}.`
        : 'The code opens the bench at this setup on a phone or tablet.']),
    ].map((text) => ({ text, bold: false })),
  ].flatMap(({ text, bold }) => wrapText(text, textWidthMm, 2.9, bold).map((line) => ({ text: line, bold })));
  return {
    heightMm: Math.max(lines.length * 3.9 + 1, url === undefined ? 0 : QR_ROOM_MM),
    draw: (x, y): PageItem[] => [
      ...lines.map(({ text, bold }, i) => words({ x, y: y + 3 + i * 3.9 }, text, 2.9, 'words', bold ? { bold } : {})),
      ...(url === undefined ? [] : [path(qrRings(url, { x: x + width - QR_MM - (QR_ROOM_MM - QR_MM) / 2, y: y + (QR_ROOM_MM - QR_MM) / 2 }, QR_MM), 'qr', style.black)]),
    ],
  };
}

function placeRows(context: SetupContext): Cell[][] {
  const { unit, setup } = context;
  const figure = (mm: number) => formatLength(mm, unit, unit === 'mm' ? { withoutUnit: true } : { withoutUnit: true, inches: 'decimal' });
  return context.places.map((place) => {
    const { placement } = place;
    const stamps = placement.stamps.map(({ stampId, copy }) => {
      const owned = context.order.stamps.find((stamp) => stamp.id === stampId)?.owned ?? 1;
      const known = context.labels.sentiments[stampId];
      return `${stampName(context, stampId)}${known?.name !== undefined && known.words !== undefined && known.words !== known.name ? ` “${known.words}”` : ''}${owned > 1 ? ` (stamp ${copy} of ${owned})` : ''}${known?.boxOnly ? ' (size only)' : ''}`;
    });
    const dies = [...new Set(place.labels.map((label) => (label.cut === 'die' ? dieName(context, label.dieId) : label.cut === 'straight' ? 'cut straight' : 'not cut')))];
    const made = setup.presses.reduce((sum, press) => sum + press.inked.filter((inked) => inked.placement === placement.id).length, 0);
    return [`${place.number}`, stamps.join(' + '), dies.join(', '), figure(placement.x), figure(placement.y), `${formatLength(placement.rotationDeg, 'mm', { withoutUnit: true })}°`, inkLetters(context, place), `${made}`];
  });
}

function pressRows(context: SetupContext): Cell[][] {
  const { setup } = context;
  const bySheet = new Map<number, Press[]>();
  for (const press of setup.presses) bySheet.set(press.sheet, [...(bySheet.get(press.sheet) ?? []), press]);
  const runs: { sheets: number[]; presses: Press[]; key: string }[] = [];
  for (const [sheet, presses] of bySheet) {
    const key = JSON.stringify(presses.map(({ turn, takeOff, inked }) => [turn, takeOff, inked]));
    const last = runs.at(-1);
    if (last?.key === key) last.sheets.push(sheet);
    else runs.push({ sheets: [sheet], presses, key });
  }
  return runs.flatMap(({ sheets, presses }) => presses.map((press): Cell[] => [
    { boxes: sheets.map(String) },
    setup.turns === 1 ? '–' : press.turn === 0 ? 't1, as laid' : `t${press.turn + 1}, ${setup.turns === 2 ? 'half turn' : `${press.turn * 90}° turned`}`,
    press.takeOff.length === 0 ? '–' : ranges(numbersOf(context, press.takeOff)),
    inkedWords(context, press),
    '', '',
  ]));
}

function numbersOf(context: SetupContext, ids: readonly number[]): number[] {
  return ids.map((id) => context.setup.placements.findIndex((placement) => placement.id === id) + 1).sort((a, b) => a - b);
}

/** “A: 1–3 · B: 4”. A place that takes several inks is named with each. */
function inkedWords(context: SetupContext, press: Press): string {
  const byInk = new Map<string, number[]>();
  for (const { placement, lineId } of press.inked) {
    for (const ink of new Set(context.shapes.line(lineId).pieces.map((piece) => piece.inkId))) byInk.set(ink, [...(byInk.get(ink) ?? []), placement]);
  }
  const known = inksOf(context).filter((ink) => byInk.has(ink));
  return known.length === 0 ? 'nothing' : known.map((ink) => `${context.inkLetter(ink)}: ${ranges(numbersOf(context, byInk.get(ink) ?? []))}`).join(' · ');
}

function cutRows(context: SetupContext): Cell[][] {
  return cutGroups(context).filter((group) => group.cut !== null).map(({ sheets, pass, passes, cut }): Cell[] => {
    const byDie = new Map<string, string[]>();
    for (const { dieId, placement, turn } of cut?.cuts ?? []) {
      const label = `${numbersOf(context, [placement])[0]}${context.setup.turns > 1 ? ` t${turn + 1}` : ''}`;
      byDie.set(dieId, [...(byDie.get(dieId) ?? []), label]);
    }
    const dies = [...byDie].map(([die, labels]) => `${dieName(context, die)}: ${labels.join(', ')}`).join(' · ');
    const piece = context.setup.stripCuts.length > 0 ? `Piece ${(cut?.strip ?? 0) + 1}. ` : '';
    return [{ boxes: sheets.map(String) }, `${pass} of ${passes}`, piece + dies];
  });
}

function notes(context: SetupContext): string[] {
  const inks = inksOf(context);
  const drying = inks.map((id) => ({ name: inkName(context, id), minutes: context.labels.inks[id]?.dryingMinutes }));
  const known = drying.filter((ink) => ink.minutes !== undefined);
  const solvent = inks.some((id) => /solvent/i.test(context.labels.inks[id]?.kind ?? ''));
  return [
    known.length === 0 ? 'Let the ink dry before cutting, as long as its maker says.' : `Let dry before cutting: ${known.map(({ name, minutes }) => `${name} ${minutes} min`).join(', ')}.`,
    ...(context.setup.stripCuts.length === 0 ? [] : [`Cut every sheet straight before die cutting, as the page “Strip cuts” shows. ${cautionOf('blade')}`]),
    cautionOf('magnet'), cautionOf('roller'),
    ...(solvent || known.length < inks.length ? [cautionOf('solvent')] : []),
    MAKERS_FIRST,
  ];
}

function count(n: number, one: string, many = `${one}s`): string {
  return `${n} ${n === 1 ? one : many}`;
}
