/** Stamp sets: their pictures, what was read in them, and the sentiments that come of it. */
import { z } from 'zod';
import type { Reading } from '../engine/reading/types.ts';
import { routes } from './route.ts';
import { AngleDeg, Box, Id, Instant, JobAccepted, LengthMm, LengthOrZeroMm, listQuery, Name, Note, Outline, page, Point, StudioItemParams, StudioParams, Version } from './shared.ts';

/** Pictures as people send them; the reading judges their pixels from the header. */
const PICTURE_BYTES = 25 * 1024 * 1024;
/** More than anyone draws by hand; keeps one request from carrying megabytes. */
const MAX_CORRECTIONS = 2000;

/** What the stamp is mounted on. Wood cannot hang on a platform's lid. */
export const Mount = z.enum(['clear', 'cling', 'wood']);
export type Mount = z.infer<typeof Mount>;

/** How the size of the picture is known: by the file itself (or the photo page in it), or by what the person gave. */
export const Scale = z.discriminatedUnion('kind', [
  z.object({ kind: z.literal('file') }),
  z.object({ kind: z.literal('typed'), dpi: z.number().min(20, 'At least 20 dpi.').max(9600, 'At most 9,600 dpi.') }),
  z.object({ kind: z.literal('ruler'), from: Point, to: Point, lengthMm: LengthMm })
    .refine((r) => Math.hypot(r.to.x - r.from.x, r.to.y - r.from.y) >= 2, { path: ['to'], message: 'The two points lie too close together to measure by.' }),
  z.object({ kind: z.literal('sheet'), cornersPx: z.tuple([Point, Point, Point, Point]), widthMm: LengthMm, heightMm: LengthMm })
    .refine((s) => turnsOneWay(s.cornersPx), { path: ['cornersPx'], message: 'The corners must go round the sheet: top left, top right, bottom right, bottom left.' }),
]);
export type Scale = z.infer<typeof Scale>;

/** Convex and clockwise as seen: the only way that a flat sheet can look in a picture. */
function turnsOneWay(corners: readonly { x: number; y: number }[]): boolean {
  return corners.every((b, i) => {
    const a = corners[(i + 3) % 4], c = corners[(i + 1) % 4];
    return (b.x - a.x) * (c.y - b.y) - (b.y - a.y) * (c.x - b.x) > 0;
  });
}

/** What the person put right, as places in the picture; see the reading kernel. */
export const Corrections = z.object({
  joins: z.array(z.array(Point).min(2).max(500)).max(MAX_CORRECTIONS),
  splits: z.array(z.object({ from: Point, to: Point })).max(MAX_CORRECTIONS),
  setAside: z.array(Point).max(MAX_CORRECTIONS),
});

/** In mm, or in px of the picture while its scale is not known; `auto` is the reading's own choice. */
export const GroupingGap = z.union([z.literal('auto'), z.number().min(0).max(10_000)]);

export const PictureState = z.enum(['waiting', 'read', 'failed']);

export const Picture = z.object({
  id: Id,
  stampSetId: Id,
  position: z.int(),
  /** As the person's file was called; shown only. */
  fileName: z.string(),
  /** As its header says, turned upright. */
  widthPx: z.int(),
  heightPx: z.int(),
  /** It shows the stamps' own faces and is flipped. */
  mirrored: z.boolean(),
  scale: Scale,
  groupingGap: GroupingGap,
  corrections: Corrections,
  state: PictureState,
  error: z.object({ code: z.string(), message: z.string() }).nullable(),
  /** The reading under way, or the last one. */
  jobId: Id.nullable(),
  /** Changes with the picture itself; part of the image's address, so that browsers may keep it. Null until it can be shown. */
  imageKey: z.string().nullable(),
  /** Its words read better the other way round than it is read now: shown as a proposal. */
  looksMirrored: z.boolean(),
  version: Version,
  updatedAt: Instant,
});
export type Picture = z.infer<typeof Picture>;

export const Sentiment = z.object({
  id: Id,
  stampSetId: Id,
  /** Null where it was typed. */
  pictureId: Id.nullable(),
  /** In the order of reading within its picture; the number drawn on it. */
  number: z.int(),
  /** As the person called it, or empty. */
  name: z.string(),
  /** Its name, else its words, else its number. */
  title: z.string(),
  words: z.string(),
  /** Recognised words are a proposal until the person has seen to them. */
  wordsBy: z.enum(['person', 'recognised']).nullable(),
  tags: z.array(z.string()),
  /** Null while the picture has no scale. */
  widthMm: z.number().nullable(),
  heightMm: z.number().nullable(),
  /** False where the artwork is only the rectangle of a typed size. */
  outlined: z.boolean(),
  /** Lean as read, and the one by which it is set level where the person chose another. */
  angleDeg: z.number(),
  uprightDeg: z.number().nullable(),
  inkAreaMm2: z.number().nullable(),
  thinnestStrokeMm: z.number().nullable(),
  /** Clear polymer left around the ink when the stamp was cut out. */
  trimMm: z.number(),
  owned: z.int(),
  setAside: z.boolean(),
  /** Where it stands, as shares of the picture's width and height. */
  place: Box.nullable(),
  version: Version,
  updatedAt: Instant,
});
export type Sentiment = z.infer<typeof Sentiment>;

const Tag = z.string().trim().toLowerCase().min(1).max(40, 'A tag has at most 40 characters.');
export const Tags = z.array(Tag).max(20, 'At most 20 tags.').transform((tags) => [...new Set(tags)]);
const Words = z.string().trim().max(500, 'At most 500 characters.');
const Owned = z.int('A whole number.').min(0, 'Not less than 0.').max(99, 'At most 99.');
const StoragePlace = z.string().trim().max(200, 'At most 200 characters.');

const Counts = { sentiments: z.int(), pictures: z.int() };
export const StampSetCard = z.object({
  id: Id, name: z.string(), mount: Mount, storagePlace: z.string(), note: z.string(), version: Version,
  createdAt: Instant, updatedAt: Instant, deletedAt: Instant.nullable(),
  ...Counts,
  /** Picture shown on the card. */
  pictureId: Id.nullable(), imageKey: z.string().nullable(),
  tags: z.array(z.string()),
  /** Sentiments whose size is not known yet. */
  unscaled: z.int(),
});
export type StampSetCard = z.infer<typeof StampSetCard>;

export const StampSet = z.object({
  id: Id, name: z.string(), mount: Mount, storagePlace: z.string(), note: z.string(), version: Version,
  createdAt: Instant, updatedAt: Instant, deletedAt: Instant.nullable(),
  pictures: z.array(Picture),
  /** Those set aside too; without those that the grouping at hand does not give. */
  sentiments: z.array(Sentiment),
});
export type StampSet = z.infer<typeof StampSet>;

const SetFields = { name: Name, mount: Mount.default('clear'), storagePlace: StoragePlace.default(''), note: Note.default('') };
const PictureParams = z.object({ studioId: Id, id: Id, pictureId: Id });

export const PictureResult = z.object({ picture: Picture, sentiments: z.array(Sentiment) });
export type PictureResult = z.infer<typeof PictureResult>;

export const SentimentQuery = listQuery(['name', 'size', 'set', 'updated']).extend({
  stampSetId: Id.optional(),
  tag: z.string().max(40).optional(),
  /** `true`: only those whose size is known. */
  sized: z.stringbool().optional(),
});

export const stampSetRoutes = routes({
  'GET /studios/:studioId/stamp-sets': {
    summary: 'List stamp sets; search looks at names, places, words and tags', access: 'helper', params: StudioParams,
    query: listQuery(['name', 'created', 'updated', 'sentiments']).extend({ tag: z.string().max(40).optional() }), response: page(StampSetCard),
  },
  'POST /studios/:studioId/stamp-sets': { summary: 'Add a stamp set without a picture', access: 'maker', params: StudioParams, status: 201, body: z.object(SetFields), response: StampSet },
  'POST /studios/:studioId/stamp-sets/from-picture': {
    summary: 'Add a stamp set with its first picture, which is read', access: 'maker', costly: true, params: StudioParams, status: 202,
    upload: { field: 'picture', maxBytes: PICTURE_BYTES }, body: z.object({ ...SetFields, mirrored: z.stringbool().default(false) }), response: StampSet,
  },
  'GET /studios/:studioId/stamp-sets/:id': { summary: 'One stamp set with its pictures and sentiments', access: 'helper', params: StudioItemParams, response: StampSet },
  'PATCH /studios/:studioId/stamp-sets/:id': {
    summary: 'Change a stamp set', access: 'maker', params: StudioItemParams,
    body: z.object({ version: Version, name: Name.optional(), mount: Mount.optional(), storagePlace: StoragePlace.optional(), note: Note.optional() }), response: StampSet,
  },
  'DELETE /studios/:studioId/stamp-sets/:id': { summary: 'Put a stamp set in the bin', access: 'maker', params: StudioItemParams },
  'POST /studios/:studioId/stamp-sets/:id/restore': { summary: 'Take a stamp set out of the bin', access: 'maker', params: StudioItemParams, response: StampSet },

  'POST /studios/:studioId/stamp-sets/:id/pictures': {
    summary: 'Add a picture, which is read', access: 'maker', costly: true, params: StudioItemParams, status: 202,
    upload: { field: 'picture', maxBytes: PICTURE_BYTES }, body: z.object({ mirrored: z.stringbool().default(false) }), response: Picture,
  },
  'PUT /studios/:studioId/stamp-sets/:id/pictures/:pictureId': {
    summary: 'Replace a picture by another of the same stamps; corrections stay where they fit', access: 'maker', costly: true, params: PictureParams, status: 202,
    upload: { field: 'picture', maxBytes: PICTURE_BYTES }, body: z.object({ version: z.coerce.number().int().min(1) }), response: Picture,
  },
  'DELETE /studios/:studioId/stamp-sets/:id/pictures/:pictureId': { summary: 'Take a picture and its sentiments away', access: 'maker', params: PictureParams },
  'POST /studios/:studioId/stamp-sets/:id/pictures/:pictureId/restore': { summary: 'Bring a picture and its sentiments back', access: 'maker', params: PictureParams, response: Picture },
  'GET /studios/:studioId/stamp-sets/:id/pictures/:pictureId/image': {
    summary: 'The picture turned upright, not flipped: for the page (view) or for a card (small)', access: 'helper', params: PictureParams,
    query: z.object({ size: z.enum(['view', 'small']).default('view'), key: z.string().max(80).optional() }), produces: 'image/jpeg',
  },
  'GET /studios/:studioId/stamp-sets/:id/pictures/:pictureId/reading': {
    summary: 'What was read in the picture, before scale, gap and corrections of the person', access: 'helper', params: PictureParams,
    response: z.object({ pictureId: Id, version: Version, reading: z.custom<Reading>() }),
  },
  'PUT /studios/:studioId/stamp-sets/:id/pictures/:pictureId/corrections': {
    summary: 'Store scale, grouping gap and corrections; sentiments follow', access: 'maker', params: PictureParams,
    body: z.object({ version: Version, scale: Scale, groupingGap: GroupingGap, corrections: Corrections }), response: PictureResult,
  },
  'POST /studios/:studioId/stamp-sets/:id/pictures/:pictureId/read': {
    summary: 'Read the picture again: flipped, or within the corners of its sheet', access: 'maker', costly: true, params: PictureParams, status: 202,
    body: z.object({ version: Version, mirrored: z.boolean().optional() }), response: JobAccepted,
  },
  'POST /studios/:studioId/stamp-sets/:id/pictures/:pictureId/words': { summary: 'Recognise the words of the sentiments that nobody has named', access: 'maker', costly: true, params: PictureParams, status: 202, response: JobAccepted },

  'GET /studios/:studioId/sentiments': { summary: 'Sentiments of all stamp sets', access: 'helper', params: StudioParams, query: SentimentQuery, response: page(Sentiment.extend({ stampSetName: z.string(), mount: Mount })) },
  'GET /studios/:studioId/sentiments/:id': { summary: 'One sentiment with its outline', access: 'helper', params: StudioItemParams, response: Sentiment.extend({ artwork: Outline.nullable() }) },
  'GET /studios/:studioId/sentiments/:id/drawing': {
    summary: 'The outline as a picture, true to proportion', access: 'helper', params: StudioItemParams, 
    // Any text that changes with the outline, so that browsers may keep the drawing.
    query: z.object({ key: z.string().max(80).optional() }), produces: 'image/svg+xml',
  },
  'POST /studios/:studioId/stamp-sets/:id/sentiments': {
    summary: 'Add a sentiment by its size, without a picture', access: 'maker', params: StudioItemParams, status: 201,
    body: z.object({ name: z.string().trim().max(120).default(''), words: Words.default(''), tags: Tags.default([]), widthMm: LengthMm, heightMm: LengthMm, owned: Owned.default(1) }), response: Sentiment,
  },
  'PATCH /studios/:studioId/sentiments/:id': {
    summary: 'Change a sentiment; width and height only where it was typed', access: 'maker', params: StudioItemParams,
    body: z.object({
      version: Version, name: z.string().trim().max(120).optional(), words: Words.optional(), tags: Tags.optional(), owned: Owned.optional(),
      trimMm: LengthOrZeroMm.optional(), uprightDeg: AngleDeg.nullable().optional(), widthMm: LengthMm.optional(), heightMm: LengthMm.optional(),
    }),
    response: Sentiment,
  },
  'DELETE /studios/:studioId/sentiments/:id': { summary: 'Put a typed sentiment in the bin; those of a picture are set aside there', access: 'maker', params: StudioItemParams },
  'POST /studios/:studioId/sentiments/:id/restore': { summary: 'Take a sentiment out of the bin', access: 'maker', params: StudioItemParams, response: Sentiment },
});
