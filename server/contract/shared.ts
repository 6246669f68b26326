/** Schemas that several nouns use. */
import { z } from 'zod';

export const Id = z.uuid();
export const StudioParams = z.object({ studioId: Id });
/** For `/studios/:studioId/<noun>/:id`. */
export const StudioItemParams = z.object({ studioId: Id, id: Id });

export const Name = z.string().trim().min(1, 'Give it a name.').max(120, 'At most 120 characters.');
export const Note = z.string().trim().max(2000, 'At most 2,000 characters.');
/** Row version: counts from 1, goes up by one with each change; a stale one is answered with 409 and the current row. */
export const Version = z.int().min(1);
export const Instant = z.iso.datetime();

/** Lengths in mm. The upper limit is a metre: nothing on a card maker's table is longer. */
export const LengthMm = z.number().positive('Must be more than 0.').max(1000, 'At most 1000 mm.');
export const LengthOrZeroMm = z.number().min(0, 'Must not be negative.').max(1000, 'At most 1000 mm.');
export const AngleDeg = z.number().min(-360).max(360);

export const Point = z.object({ x: z.number(), y: z.number() });
export const Box = z.object({ x: z.number(), y: z.number(), w: z.number(), h: z.number() });
export const Outline = z.object({ rings: z.array(z.array(Point)) });

export const Role = z.enum(['owner', 'maker', 'helper']);
export type Role = z.infer<typeof Role>;

/** Query of every list. `sort` is a field of the list, with `-` before it for the other way round. */
export function listQuery<const S extends readonly [string, ...string[]]>(sorts: S) {
  const both = [...sorts, ...sorts.map((s) => `-${s}`)] as [S[number] | `-${S[number]}`, ...(S[number] | `-${S[number]}`)[]];
  return z.object({
    search: z.string().trim().max(200).optional(),
    sort: z.enum(both).optional(),
    cursor: z.string().max(400).optional(),
    limit: z.coerce.number().int().min(1).max(200).default(50),
    /** `true`: the bin, from which things can be restored for 30 days. */
    bin: z.stringbool().optional(),
  });
}

/** A page of a list: `next` is the cursor of the page after it, null on the last. `total` counts all pages. */
export function page<T extends z.ZodType>(item: T) {
  return z.object({ items: z.array(item), next: z.string().nullable(), total: z.int() });
}

/** RFC 9457 problem details. */
export const Problem = z.object({
  type: z.string(),
  title: z.string(),
  status: z.int(),
  /** Stable, for programs. */
  code: z.string(),
  /** For people. */
  detail: z.string(),
  /** Which fields of a form, and why. */
  errors: z.array(z.object({ path: z.string(), message: z.string() })).optional(),
  /** On 409 after a stale edit: the row as it is now. */
  current: z.unknown().optional(),
});
export type Problem = z.infer<typeof Problem>;

/** Answer of everything that is queued. */
export const JobAccepted = z.object({ jobId: Id });
