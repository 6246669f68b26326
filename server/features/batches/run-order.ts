/**
 * From rows to what the planner takes: one order a cardstock, with the names of everything in it. Pure; whatever cannot be
 * planned (no die chosen, size not known, wood-mounted) is told line by line and left out.
 */
import type { PlanNames } from '../../contract/plans.ts';
import type { Cardstock, Ink, Platform } from '../../contract/gear.ts';
import type { StudioSettings } from '../../contract/studio.ts';
import type { DieGeometry } from '../../engine/fit/types.ts';
import type { RunLine, RunOrder } from '../../engine/gangrun/types.ts';
import type { Outline, Point } from '../../engine/geometry/types.ts';
import type { SentimentForPlan } from '../stamp-sets/stamp-sets.queries.ts';
import type { BatchRow } from './batches.queries.ts';
import { borderedLabel, compose, pieceCentres } from './line-fit.ts';
import type { WholeLine } from './lines.queries.ts';

export interface OrderDie { id: string; name: string; geometry: DieGeometry; owned: number; width_mm: number; height_mm: number }
export interface OrderParts {
  batch: BatchRow;
  lines: WholeLine[];
  platform: Platform;
  settings: StudioSettings;
  sentiments: ReadonlyMap<string, SentimentForPlan>;
  dies: ReadonlyMap<string, OrderDie>;
  inks: ReadonlyMap<string, Ink>;
  cardstocks: ReadonlyMap<string, Cardstock>;
}
export interface LeftOut { lineId: string; title: string; code: string; message: string }
export interface AssembledRun { cardstockId: string | null; order: RunOrder; names: PlanNames; leftOut: LeftOut[] }

/** Stands for "whichever": it asks for no room, and the ticket says that an ink has yet to be chosen. */
const NO_INK = 'ink-to-be-chosen';
/** The same batch gives the same plan on every machine. */
const SEED = 1;

export function assembleRuns(parts: OrderParts): AssembledRun[] {
  const cardstockIds = [...new Set(parts.lines.map((line) => line.cardstock_id))];
  return inOrderOfStamps(cardstockIds, parts.lines).map((cardstockId) => assembleRun(parts, cardstockId));
}

/** Cardstocks that share stamps follow one another, so that as few stamps as possible are taken off and set down again. */
function inOrderOfStamps(cardstockIds: (string | null)[], lines: readonly WholeLine[]): (string | null)[] {
  const stampsOf = (id: string | null) => new Set(lines.filter((line) => line.cardstock_id === id).flatMap((line) => line.pieces.map((piece) => piece.sentiment_id)));
  const [first, ...rest] = cardstockIds;
  if (first === undefined) return [];
  const ordered = [first];
  while (rest.length > 0) {
    const before = stampsOf(ordered[ordered.length - 1]);
    const shared = rest.map((id) => [...stampsOf(id)].filter((stamp) => before.has(stamp)).length);
    ordered.push(...rest.splice(shared.indexOf(Math.max(...shared)), 1));
  }
  return ordered;
}

function assembleRun(parts: OrderParts, cardstockId: string | null): AssembledRun {
  const { batch, platform, settings } = parts;
  const lines = parts.lines.filter((line) => line.cardstock_id === cardstockId);
  const names: PlanNames = { sentiments: {}, dies: {}, inks: {}, lines: {} };
  const leftOut: LeftOut[] = [];
  const dies = new Map<string, RunOrder['dies'][number]>();
  const runLines = lines.flatMap((line): RunLine[] => {
    const title = titleOf(line, parts.sentiments);
    names.lines[line.id] = { title, quantity: line.quantity, overs: line.overs, cut: line.cut };
    const made = runLine(line, parts);
    if ('code' in made) {
      leftOut.push({ lineId: line.id, title, ...made });
      return [];
    }
    dies.set(made.die.id, made.die);
    names.dies[made.die.id] = { name: made.dieName };
    return [made.line];
  });
  const stampIds = [...new Set(runLines.flatMap((line) => line.pieces.map((piece) => piece.stampId)))];
  const inkIds = [...new Set(runLines.flatMap((line) => line.pieces.map((piece) => piece.inkId)))];
  for (const id of stampIds) names.sentiments[id] = { name: parts.sentiments.get(id)!.name, words: parts.sentiments.get(id)!.words };
  for (const id of inkIds) {
    const ink = parts.inks.get(id);
    names.inks[id] = ink ? { name: ink.name, colour: ink.colour, kind: ink.kind, dryingMinutes: ink.dryingMinutes } : { name: 'Ink not chosen yet', colour: '#56607A', kind: null, dryingMinutes: 0 };
  }
  const order: RunOrder = {
    sheet: { widthMm: batch.sheet_width_mm, heightMm: batch.sheet_height_mm, marginMm: batch.margin_mm },
    platform: {
      widthMm: platform.widthMm, heightMm: platform.heightMm, keepOuts: platform.keepOuts, corner: platform.corner, hinge: platform.hinge,
      ...(platform.openSides ? { openSides: platform.openSides } : {}), ...(platform.lid ? { lid: platform.lid } : {}),
    },
    gapMm: batch.gap_mm, turnToleranceMm: batch.turn_tolerance_mm, ...(batch.max_feed_width_mm === null ? {} : { maxFeedWidthMm: batch.max_feed_width_mm }),
    stamps: stampIds.map((id) => {
      const sentiment = parts.sentiments.get(id)!;
      return { id, artwork: sentiment.artwork!, trimMm: sentiment.trimMm, owned: sentiment.owned };
    }),
    dies: [...dies.values()],
    inks: inkIds.map((id) => ({ id, clearMm: parts.inks.get(id)?.clearMm ?? 0 })),
    lines: runLines, turns: batch.turns, aim: batch.aim, pace: settings.pace, seed: SEED,
  };
  return { cardstockId, order, names, leftOut };
}

function titleOf(line: WholeLine, sentiments: OrderParts['sentiments']): string {
  return line.pieces.map((piece) => sentiments.get(piece.sentiment_id)?.name ?? 'A stamp that is gone').join(' + ');
}

type Refusal = Pick<LeftOut, 'code' | 'message'>;

function runLine(line: WholeLine, parts: OrderParts): { line: RunLine; die: RunOrder['dies'][number]; dieName: string } | Refusal {
  const stamps = line.pieces.map((piece) => parts.sentiments.get(piece.sentiment_id));
  const known = stamps.filter((stamp) => stamp !== undefined);
  if (known.length < stamps.length || known.some((stamp) => stamp.deleted || stamp.setAside)) return { code: 'no-stamp', message: 'Its stamp is no longer among the stamp sets. Bring it back, or take this label out.' };
  const wooden = known.find((stamp) => stamp.mount === 'wood');
  if (wooden) return { code: 'wood-mounted', message: `“${wooden.name}” is mounted on wood and cannot hang on the lid. Stamp this label by hand.` };
  const artworks = known.map((stamp) => stamp.artwork).filter((artwork) => artwork !== null);
  if (artworks.length < known.length) return { code: 'no-size', message: 'The picture of its stamp has no scale yet, so its size is not known. Give the scale in its stamp set.' };
  const composed = compose(artworks, { arrangement: line.arrangement, align: line.align, pieceGapMm: line.piece_gap_mm });
  const label = labelOf(line, composed.artwork, parts);
  if ('code' in label) return label;
  const centres = pieceCentres(composed, label);
  return {
    die: label.die, dieName: label.dieName,
    line: {
      id: line.id,
      pieces: line.pieces.map((piece, i) => ({ stampId: piece.sentiment_id, centre: centres[i], rotationDeg: label.rotationDeg, inkId: piece.ink_id ?? NO_INK })),
      dieId: label.die.id, cut: line.cut, quantity: line.quantity, overs: line.overs, mayTurn: line.may_turn,
    },
  };
}

/** Without a name a die is called by its size; figures in mm, as printed on most of them. */
function dieTitle(die: OrderDie): string {
  const mm = (length: number) => String(Math.round(length * 10) / 10);
  return die.name || `${mm(die.width_mm)} × ${mm(die.height_mm)} mm`;
}

interface Label { die: RunOrder['dies'][number]; dieName: string; centre: Point; rotationDeg: number }

function labelOf(line: WholeLine, artwork: Outline, parts: OrderParts): Label | Refusal {
  if (line.cut !== 'die') {
    const { geometry, centre } = borderedLabel(artwork, line.border_mm);
    // An outline of its own for each such line: no owned die is used up.
    return { die: { id: `label-${line.id}`, geometry, owned: 0 }, dieName: line.cut === 'straight' ? 'Cut straight' : 'Not cut', centre, rotationDeg: 0 };
  }
  const die = line.die_id === null ? undefined : parts.dies.get(line.die_id);
  if (!die || line.placed_by === null) return { code: 'no-die', message: 'No die has been chosen for it. Choose one at the step Fit.' };
  return {
    die: { id: die.id, geometry: die.geometry, owned: die.owned }, dieName: dieTitle(die),
    centre: { x: line.centre_x_mm!, y: line.centre_y_mm! }, rotationDeg: line.rotation_deg!,
  };
}
