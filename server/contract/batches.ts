/** Batches: how many cards, which labels, in which dies and inks. Their plans have a table of their own (plans.ts). */
import { z } from 'zod';
import type { DieGeometry, Fit } from '../engine/fit/types.ts';
import { routes } from './route.ts';
import { AngleDeg, Id, Instant, LengthMm, LengthOrZeroMm, listQuery, Name, Note, Outline, page, Point, StudioItemParams, StudioParams, Version } from './shared.ts';
import { Mount } from './stamp-sets.ts';

/** More labels than anyone stamps in an evening; keeps one planning within its time. */
export const MAX_LINES = 60;
/** Stamps in one label. */
export const MAX_PIECES = 6;

export const BatchState = z.enum(['chosen', 'planned', 'printed', 'stamping', 'finished']);
export type BatchState = z.infer<typeof BatchState>;
export const Turns = z.enum(['auto', 'none', 'half', 'quarter']);
export const Aim = z.enum(['time', 'sheets']);
/** What gives the label its edge: a die, straight cuts of a trimmer, or nothing (stamped on the card front itself). */
export const Cut = z.enum(['die', 'straight', 'none']);
export const Arrangement = z.enum(['under', 'beside']);
export const Align = z.enum(['start', 'middle', 'end']);
export const Verdict = z.enum(['roomy', 'good', 'snug', 'tight', 'no']);

const Count = z.int('A whole number.').min(1, 'At least 1.').max(1000, 'At most 1,000.');
const Spares = z.int('A whole number.').min(0, 'Not less than 0.').max(1000, 'At most 1,000.');
const Labels = z.int('A whole number.').min(0, 'Not less than 0.').max(10_000, 'At most 10,000.');

export const Piece = z.object({
  sentimentId: Id,
  inkId: Id.nullable(),
  /** Of the sentiment as it is now. */
  title: z.string(),
  stampSetId: Id,
  mount: Mount,
  widthMm: z.number().nullable(),
  heightMm: z.number().nullable(),
  owned: z.int(),
  /** Set aside, or in the bin with its set or picture. */
  gone: z.boolean(),
  version: Version,
});
export type Piece = z.infer<typeof Piece>;

/** Where all stamps of the line together stand in the box of the die's cut line, and the border that gives. */
export const Place = z.object({
  centre: Point, rotationDeg: z.number(), borderMm: z.number(), /** Proven: no place is better. */ boundMm: z.number(), verdict: Verdict, byHand: z.boolean(),
});
export type Place = z.infer<typeof Place>;

export const BatchLine = z.object({
  id: Id,
  position: z.int(),
  /** The stamps' names, joined. */
  title: z.string(),
  pieces: z.array(Piece),
  arrangement: Arrangement,
  align: Align,
  pieceGapMm: z.number(),
  cut: Cut,
  dieId: Id.nullable(),
  /** Around the ink where no die gives the label its size. */
  borderMm: z.number(),
  place: Place.nullable(),
  quantity: z.int(),
  overs: z.int(),
  cardstockId: Id.nullable(),
  /** Any label angle on the sheet, not only upright. */
  mayTurn: z.boolean(),
  version: Version,
});
export type BatchLine = z.infer<typeof BatchLine>;

const sheet = {
  sheetWidthMm: LengthMm, sheetHeightMm: LengthMm, marginMm: LengthOrZeroMm, gapMm: LengthOrZeroMm, turnToleranceMm: LengthOrZeroMm,
  /** Widest piece that the die-cutting machine takes; null: anything. */
  maxFeedWidthMm: LengthMm.nullable(),
  turns: Turns, aim: Aim, platformId: Id.nullable(), printerId: Id.nullable(),
};
const counts = { designs: Count, people: Count, spares: Spares };

export const BatchCard = z.object({
  id: Id, name: z.string(), note: z.string(), state: BatchState,
  designs: z.int(), people: z.int(), spares: z.int(),
  /** designs × people + spares. */
  cards: z.int(),
  lines: z.int(),
  /** Wanted on cards and on top of that. */
  labels: z.int(),
  /** Sheets of the newest plan. */
  sheets: z.int().nullable(),
  version: Version, createdAt: Instant, updatedAt: Instant, deletedAt: Instant.nullable(),
});
export type BatchCard = z.infer<typeof BatchCard>;

export const Batch = BatchCard.extend({
  platformId: Id.nullable(), printerId: Id.nullable(),
  sheetWidthMm: z.number(), sheetHeightMm: z.number(), marginMm: z.number(), gapMm: z.number(), turnToleranceMm: z.number(), maxFeedWidthMm: z.number().nullable(),
  turns: Turns, aim: Aim,
  lineItems: z.array(BatchLine),
  /** Planning under way or the last one. */
  planJobId: Id.nullable(),
  /** Newest plan; `outdated` where something was changed since. */
  plan: z.object({ id: Id, number: z.int(), usedAt: Instant.nullable(), outdated: z.boolean() }).nullable(),
});
export type Batch = z.infer<typeof Batch>;

export const FitRow = z.object({
  lineId: Id,
  /** All stamps of the line in their arrangement; null while a size is missing. */
  artwork: Outline.nullable(),
  /** In the order of `dies`; empty without artwork. */
  fits: z.array(z.custom<Fit>()),
  recommendedDieId: Id.nullable(),
});
export type FitRow = z.infer<typeof FitRow>;
export const FitTable = z.object({
  dies: z.array(z.object({ id: Id, name: z.string(), dieSetName: z.string(), geometry: z.custom<DieGeometry>(), widthMm: z.number(), heightMm: z.number(), areaMm2: z.number(), owned: z.int() })),
  rows: z.array(FitRow),
});
export type FitTable = z.infer<typeof FitTable>;

const LineParams = z.object({ studioId: Id, id: Id, lineId: Id });
const lineChange = z.object({
  version: Version,
  quantity: Labels, overs: Labels, cardstockId: Id.nullable(), mayTurn: z.boolean(), cut: Cut, borderMm: LengthOrZeroMm,
  arrangement: Arrangement, align: Align, pieceGapMm: LengthOrZeroMm,
  /** Sentiments in their order, each with its ink. */
  pieces: z.array(z.object({ sentimentId: Id, inkId: Id.nullable() })).min(1, 'A label needs a stamp.').max(MAX_PIECES, `At most ${MAX_PIECES} stamps in a label.`),
  /** Another die puts the stamps in their best place. */
  dieId: Id.nullable(),
  /** Moved by hand, or `fit`: back to the best place. */
  place: z.union([z.literal('fit'), z.object({ centre: Point, rotationDeg: AngleDeg })]),
}).partial().required({ version: true });

export const batchRoutes = routes({
  'GET /studios/:studioId/batches': {
    summary: 'List batches', access: 'helper', params: StudioParams, query: listQuery(['updated', 'name', 'created', 'cards']).extend({ state: BatchState.optional() }), response: page(BatchCard),
  },
  'POST /studios/:studioId/batches': {
    summary: 'Begin a batch; gear and sheet are proposed from what the studio has', access: 'maker', params: StudioParams, status: 201,
    body: z.object({ name: Name, note: Note.default(''), designs: Count.default(1), people: Count, spares: Spares.default(0) }), response: Batch,
  },
  'GET /studios/:studioId/batches/:id': { summary: 'One batch with its lines', access: 'helper', params: StudioItemParams, response: Batch },
  'PATCH /studios/:studioId/batches/:id': {
    summary: 'Change a batch', access: 'maker', params: StudioItemParams,
    body: z.object({ name: Name, note: Note, ...counts, ...sheet }).partial().extend({ version: Version }), response: Batch,
  },
  'DELETE /studios/:studioId/batches/:id': { summary: 'Put a batch in the bin', access: 'maker', params: StudioItemParams },
  'POST /studios/:studioId/batches/:id/restore': { summary: 'Take a batch out of the bin', access: 'maker', params: StudioItemParams, response: Batch },
  'POST /studios/:studioId/batches/:id/copy': { summary: 'The same once more: lines and gear, without plans', access: 'maker', params: StudioItemParams, status: 201, body: z.object({ name: Name }), response: Batch },

  'POST /studios/:studioId/batches/:id/lines': {
    summary: 'Add labels: each a list of sentiments that stand in it together', access: 'maker', params: StudioItemParams, status: 201,
    body: z.object({ lines: z.array(z.object({ sentimentIds: z.array(Id).min(1).max(MAX_PIECES), quantity: Labels.optional() })).min(1).max(MAX_LINES) }), response: Batch,
  },
  'PATCH /studios/:studioId/batches/:id/lines/:lineId': { summary: 'Change a label', access: 'maker', params: LineParams, body: lineChange, response: Batch },
  'DELETE /studios/:studioId/batches/:id/lines/:lineId': { summary: 'Take a label out of the batch', access: 'maker', params: LineParams, response: Batch },
  'POST /studios/:studioId/batches/:id/spread': { summary: 'Share the cards evenly among the labels', access: 'maker', params: StudioItemParams, response: Batch },
  'POST /studios/:studioId/batches/:id/for-all': {
    summary: 'The same ink, cardstock or overs for every label', access: 'maker', params: StudioItemParams,
    body: z.object({ inkId: Id.nullable(), cardstockId: Id.nullable(), overs: Labels, mayTurn: z.boolean() }).partial(), response: Batch,
  },
  'POST /studios/:studioId/batches/:id/combine': {
    summary: 'Make one label of several: their stamps stand in it together', access: 'maker', params: StudioItemParams,
    body: z.object({ lineIds: z.array(Id).min(2).max(MAX_PIECES), arrangement: Arrangement.default('under') }), response: Batch,
  },
  'GET /studios/:studioId/batches/:id/fit-table': { summary: 'Every label of the batch in every die of the studio', access: 'helper', costly: true, params: StudioItemParams, response: FitTable },
  'POST /studios/:studioId/batches/:id/recommended-dies': {
    summary: 'Take the recommended die for every label, or for those that have none', access: 'maker', costly: true, params: StudioItemParams,
    body: z.object({ onlyMissing: z.boolean().default(true) }), response: Batch,
  },
});
