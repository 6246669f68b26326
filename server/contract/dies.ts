/** Nested sets of label dies: their shapes, sizes, stitch lines and rims. */
import { z } from 'zod';
import { dieProblem } from '../engine/fit/die-shapes.ts';
import type { DieGeometry, DieShape } from '../engine/fit/types.ts';
import type { Outline } from '../engine/geometry/types.ts';
import { routes } from './route.ts';
import { Id, Instant, LengthOrZeroMm, listQuery, Name, Note, page, StudioItemParams, StudioParams, Version } from './shared.ts';

/** Far above any traced outline, far below what would hold up a fit. */
const MAX_OUTLINE_POINTS = 5000;

/** The shape's own parameters are checked by the kernel that draws it, so that they are described once. */
export const Geometry = z
  .object({ shape: z.custom<DieShape>((shape) => typeof shape === 'object' && shape !== null, 'Choose a shape.'), stitchInsetMm: LengthOrZeroMm.optional(), rimMm: LengthOrZeroMm.optional() })
  .transform((geometry, context): DieGeometry => {
    const shape = geometry.shape;
    const tooMany = shape.kind === 'outline' && (shape.outline?.rings ?? []).flat().length > MAX_OUTLINE_POINTS;
    const problem = tooMany ? `An outline has at most ${MAX_OUTLINE_POINTS} points.` : dieProblem(geometry);
    if (problem !== null) context.addIssue({ code: 'custom', message: problem });
    return geometry;
  });

export const Owned = z.int('A whole number.').min(0, 'Not less than 0.').max(99, 'At most 99.');

export const Die = z.object({
  id: Id,
  dieSetId: Id,
  /** Empty: the die is called by its size, in the unit of whoever reads. */
  name: z.string(),
  geometry: z.custom<DieGeometry>(),
  /** Box of the cut line. */
  widthMm: z.number(),
  heightMm: z.number(),
  areaMm2: z.number(),
  owned: z.int(),
  version: Version,
  updatedAt: Instant,
});
export type Die = z.infer<typeof Die>;

export const NewDie = z.object({ name: z.string().trim().max(120).default(''), geometry: Geometry, owned: Owned.default(1) });

export const DieSet = z.object({
  id: Id,
  name: z.string(),
  note: z.string(),
  version: Version,
  createdAt: Instant,
  updatedAt: Instant,
  deletedAt: Instant.nullable(),
  /** Largest first. */
  dies: z.array(Die),
});
export type DieSet = z.infer<typeof DieSet>;

export const DieSetQuery = listQuery(['name', 'created', 'updated']);

export const dieRoutes = routes({
  'GET /studios/:studioId/die-sets': {
    summary: 'List die sets with their dies', access: 'helper', params: StudioParams, query: DieSetQuery, response: page(DieSet),
  },
  'POST /studios/:studioId/die-sets': {
    summary: 'Add a die set, with dies or without', access: 'maker', params: StudioParams, status: 201,
    body: z.object({ name: Name, note: Note.default(''), dies: z.array(NewDie).max(60, 'At most 60 dies in a set.').default([]) }), response: DieSet,
  },
  'GET /studios/:studioId/die-sets/:id': { summary: 'One die set', access: 'helper', params: StudioItemParams, response: DieSet },
  'PATCH /studios/:studioId/die-sets/:id': {
    summary: 'Rename a die set', access: 'maker', params: StudioItemParams,
    body: z.object({ version: Version, name: Name.optional(), note: Note.optional() }), response: DieSet,
  },
  'DELETE /studios/:studioId/die-sets/:id': { summary: 'Put a die set in the bin', access: 'maker', params: StudioItemParams },
  'POST /studios/:studioId/die-sets/:id/restore': { summary: 'Take a die set out of the bin', access: 'maker', params: StudioItemParams, response: DieSet },
  'POST /studios/:studioId/die-sets/:id/dies': {
    summary: 'Add dies to a set', access: 'maker', params: StudioItemParams, status: 201,
    body: z.object({ dies: z.array(NewDie).min(1, 'Add at least one die.').max(60, 'At most 60 dies at once.') }), response: DieSet,
  },
  'GET /studios/:studioId/fit-table': {
    summary: 'What a fit table is made of: sentiments with their outlines, dies, the studio\'s verdict limits', access: 'helper', params: StudioParams,
    query: z.object({ stampSet: Id.optional(), dieSet: Id.optional() }),
    response: z.object({
      sentiments: z.array(z.object({
        id: Id, stampSetId: Id, stampSetName: z.string(), name: z.string(), tags: z.array(z.string()), widthMm: z.number(), heightMm: z.number(), artwork: z.custom<Outline>(),
        /** False where the artwork is only the rectangle of a typed size. */
        outlined: z.boolean(),
      })),
      dies: z.array(Die.extend({ dieSetName: z.string() })),
      goodMm: z.number(), snugMm: z.number(),
    }),
  },
  'GET /studios/:studioId/dies': {
    summary: 'All dies of the studio, smallest first', access: 'helper', params: StudioParams,
    response: z.object({ items: z.array(Die.extend({ dieSetName: z.string() })) }),
  },
  'PATCH /studios/:studioId/dies/:id': {
    summary: 'Change a die', access: 'maker', params: StudioItemParams,
    body: z.object({ version: Version, name: z.string().trim().max(120).optional(), geometry: Geometry.optional(), owned: Owned.optional() }), response: Die,
  },
  'DELETE /studios/:studioId/dies/:id': { summary: 'Put a die in the bin', access: 'maker', params: StudioItemParams },
  'POST /studios/:studioId/dies/:id/restore': { summary: 'Take a die out of the bin', access: 'maker', params: StudioItemParams, response: Die },
});
