/** Rows of `sentiments`. */
import type { Knex } from 'knex';
import type { z } from 'zod';
import type { Mount, Sentiment, SentimentQuery } from '../../contract/stamp-sets.ts';
import { containing, readPage } from '../../db/paging.ts';
import type { PageOf } from '../../db/paging.ts';
import type { Box, Outline } from '../../engine/geometry/types.ts';

export interface SentimentRow {
  id: string; studio_id: string; stamp_set_id: string; reading_id: string | null;
  place: Box | null; present: boolean; number: number;
  name: string; words: string; words_by: Sentiment['wordsBy']; tags: string[]; tags_by: Sentiment['wordsBy'];
  width_mm: number | null; height_mm: number | null; outlined: boolean; angle_deg: number; upright_deg: number | null;
  ink_area_mm2: number | null; thinnest_stroke_mm: number | null; trim_mm: number; owned: number; set_aside: boolean;
  version: number; created_at: Date; updated_at: Date; deleted_at: Date | null;
}
export type OutlinedRow = SentimentRow & { artwork: Outline | null };

const COLUMNS = [
  'id', 'studio_id', 'stamp_set_id', 'reading_id', 'place', 'present', 'number', 'name', 'words', 'words_by', 'tags', 'tags_by', 'width_mm', 'height_mm', 'outlined',
  'angle_deg', 'upright_deg', 'ink_area_mm2', 'thinnest_stroke_mm', 'trim_mm', 'owned', 'set_aside', 'version', 'created_at', 'updated_at', 'deleted_at',
];
const qualified = COLUMNS.map((column) => `sentiments.${column}`);

export function toSentiment(row: SentimentRow): Sentiment {
  return {
    id: row.id, stampSetId: row.stamp_set_id, pictureId: row.reading_id, number: row.number, name: row.name, title: titleOf(row),
    words: row.words, wordsBy: row.words_by, tags: row.tags, widthMm: row.width_mm, heightMm: row.height_mm, outlined: row.outlined,
    angleDeg: row.angle_deg, uprightDeg: row.upright_deg, inkAreaMm2: row.ink_area_mm2, thinnestStrokeMm: row.thinnest_stroke_mm,
    trimMm: row.trim_mm, owned: row.owned, setAside: row.set_aside, place: row.place, version: row.version, updatedAt: row.updated_at.toISOString(),
  };
}

const titleOf = (row: Pick<SentimentRow, 'name' | 'words' | 'number'>) => row.name || row.words.replace(/\s+/g, ' ').trim() || `Sentiment ${row.number}`;
/** The same in SQL, to sort and search by. */
const TITLE_SQL = `coalesce(nullif(sentiments.name, ''), nullif(sentiments.words, ''), 'Sentiment ' || lpad(sentiments.number::text, 4, '0'))`;

/** Those a person sees: given by the grouping at hand, neither they nor their picture in the bin. */
function live(db: Knex, studioId: string): Knex.QueryBuilder {
  return db('sentiments')
    .leftJoin('readings', (join) => join.on('readings.studio_id', 'sentiments.studio_id').on('readings.id', 'sentiments.reading_id'))
    .where({ 'sentiments.studio_id': studioId, 'sentiments.present': true }).whereNull('sentiments.deleted_at').whereNull('readings.deleted_at');
}

export function sentimentsOfSet(db: Knex, studioId: string, stampSetId: string): Promise<SentimentRow[]> {
  return live(db, studioId).where('sentiments.stamp_set_id', stampSetId).orderByRaw('readings.position NULLS LAST, sentiments.set_aside, sentiments.number, sentiments.id').select(qualified);
}

export function sentimentsOfPicture(db: Knex, studioId: string, readingId: string): Promise<SentimentRow[]> {
  return live(db, studioId).where('sentiments.reading_id', readingId).orderBy(['sentiments.set_aside', 'sentiments.number', 'sentiments.id']).select(qualified);
}

export type ListedSentimentRow = SentimentRow & { set_name: string; mount: Mount };

export function listSentiments(db: Knex, studioId: string, query: z.output<typeof SentimentQuery>): Promise<PageOf<ListedSentimentRow>> {
  const list = live(db, studioId)
    .join('stamp_sets', (join) => join.on('stamp_sets.studio_id', 'sentiments.studio_id').on('stamp_sets.id', 'sentiments.stamp_set_id'))
    .whereNull('stamp_sets.deleted_at').where('sentiments.set_aside', false)
    .select([...qualified, 'stamp_sets.name as set_name', 'stamp_sets.mount as mount']);
  if (query.stampSetId) list.where('sentiments.stamp_set_id', query.stampSetId);
  if (query.tag) list.whereRaw('? = ANY (sentiments.tags)', [query.tag.toLowerCase()]);
  if (query.sized) list.whereNotNull('sentiments.width_mm');
  if (query.search) {
    const pattern = containing(query.search);
    list.where((q) => q.whereILike('sentiments.name', pattern).orWhereILike('sentiments.words', pattern).orWhereILike('stamp_sets.name', pattern)
      .orWhereRaw(`array_to_string(sentiments.tags, ' ') ILIKE ?`, [pattern]));
  }
  return readPage(db, list, query, {
    name: { sql: `lower(${TITLE_SQL})`, type: 'text' },
    size: { sql: 'coalesce(sentiments.width_mm * sentiments.height_mm, 0)', type: 'float8' },
    set: { sql: `lower(stamp_sets.name) || lpad(sentiments.number::text, 6, '0')`, type: 'text' },
    updated: { sql: 'sentiments.updated_at', type: 'timestamptz' },
  }, 'set', 'sentiments.id');
}

/** What planning needs of a sentiment; its artwork is null while its picture has no scale. In the order asked for; what is gone is left out. */
export interface SentimentForPlan {
  id: string; stampSetId: string; name: string; words: string; widthMm: number | null; heightMm: number | null; artwork: Outline | null; trimMm: number; owned: number;
  outlined: boolean; mount: Mount; thinnestStrokeMm: number | null; deleted: boolean; setAside: boolean; version: number;
}

/** Also such as lie in the bin or are set aside by now, since a batch made earlier may still name them. */
export async function sentimentsByIds(db: Knex, studioId: string, ids: readonly string[]): Promise<SentimentForPlan[]> {
  const rows = await db('sentiments')
    .join('stamp_sets', (join) => join.on('stamp_sets.studio_id', 'sentiments.studio_id').on('stamp_sets.id', 'sentiments.stamp_set_id'))
    .where('sentiments.studio_id', studioId).whereIn('sentiments.id', [...ids])
    .select<(OutlinedRow & { mount: Mount; set_deleted_at: Date | null })[]>([...qualified, 'sentiments.artwork', 'stamp_sets.mount', 'stamp_sets.deleted_at as set_deleted_at']);
  const byId = new Map(rows.map((row) => [row.id, row]));
  return ids.flatMap((id) => {
    const row = byId.get(id);
    return row === undefined ? [] : [{
      id: row.id, stampSetId: row.stamp_set_id, name: titleOf(row), words: row.words, widthMm: row.width_mm, heightMm: row.height_mm, artwork: row.artwork,
      trimMm: row.trim_mm, owned: row.owned, outlined: row.outlined, mount: row.mount, thinnestStrokeMm: row.thinnest_stroke_mm,
      deleted: row.deleted_at !== null || row.set_deleted_at !== null || !row.present, setAside: row.set_aside, version: row.version,
    }];
  });
}

export interface SentimentToFit { id: string; stampSetId: string; stampSetName: string; name: string; tags: string[]; widthMm: number; heightMm: number; artwork: Outline; outlined: boolean }

/** Sentiments that count and have a size, set by set in the order of their numbers; of one set or of all. */
export async function sentimentsToFit(db: Knex, studioId: string, stampSetId: string | null): Promise<SentimentToFit[]> {
  const query = db('sentiments')
    .join('stamp_sets', (join) => join.on('stamp_sets.studio_id', 'sentiments.studio_id').on('stamp_sets.id', 'sentiments.stamp_set_id'))
    .leftJoin('readings', (join) => join.on('readings.studio_id', 'sentiments.studio_id').on('readings.id', 'sentiments.reading_id'))
    .where({ 'sentiments.studio_id': studioId, 'sentiments.present': true, 'sentiments.set_aside': false })
    .whereNull('sentiments.deleted_at').whereNull('stamp_sets.deleted_at').whereNull('readings.deleted_at').whereNotNull('sentiments.artwork')
    .orderBy(['stamp_sets.name', 'sentiments.stamp_set_id', 'sentiments.number', 'sentiments.id']).limit(MOST_TO_FIT);
  if (stampSetId !== null) query.where('sentiments.stamp_set_id', stampSetId);
  const rows = await query.select<(OutlinedRow & { set_name: string })[]>([...qualified, 'sentiments.artwork', 'stamp_sets.name as set_name']);
  return rows.map((row) => ({
    id: row.id, stampSetId: row.stamp_set_id, stampSetName: row.set_name, name: titleOf(row), tags: row.tags, widthMm: row.width_mm!, heightMm: row.height_mm!, artwork: row.artwork!, outlined: row.outlined,
  }));
}
/** More rows than this no table shows at once; one set is chosen then. */
const MOST_TO_FIT = 400;

export function findSentiment(db: Knex, studioId: string, id: string, options: { deleted?: boolean } = {}): Promise<OutlinedRow | undefined> {
  const query = db<OutlinedRow>('sentiments').where({ studio_id: studioId, id });
  return (options.deleted ? query.whereNotNull('deleted_at') : query.whereNull('deleted_at')).first([...COLUMNS, 'artwork']);
}

/** Every row of a picture, with those that the last grouping did not give. */
export function knownSentiments(tx: Knex, studioId: string, readingId: string): Promise<OutlinedRow[]> {
  return tx<OutlinedRow>('sentiments').where({ studio_id: studioId, reading_id: readingId, deleted_at: null }).orderBy(['number', 'id']).select([...COLUMNS, 'artwork']);
}

/** What the server finds, as against what the person edits. */
export const READ_COLUMNS = ['place', 'present', 'number', 'width_mm', 'height_mm', 'artwork', 'angle_deg', 'ink_area_mm2', 'thinnest_stroke_mm', 'set_aside'] as const;
export type ReadSentimentRow = Pick<OutlinedRow, 'id' | 'studio_id' | 'stamp_set_id' | 'reading_id' | (typeof READ_COLUMNS)[number]>;

/** New rows and changed ones in one statement; what the person edits, and the version that guards it, stay as they are. */
export async function saveReadSentiments(tx: Knex, rows: ReadSentimentRow[], trimMm: number): Promise<void> {
  if (rows.length === 0) return;
  const values = rows.map((row) => ({ ...row, place: JSON.stringify(row.place), artwork: row.artwork === null ? null : JSON.stringify(row.artwork), trim_mm: trimMm, updated_at: tx.fn.now() }));
  await tx('sentiments').insert(values).onConflict('id').merge([...READ_COLUMNS, 'updated_at']);
}

export async function insertTypedSentiment(tx: Knex, row: Pick<OutlinedRow, 'id' | 'studio_id' | 'stamp_set_id' | 'name' | 'words' | 'tags' | 'width_mm' | 'height_mm' | 'artwork' | 'owned' | 'trim_mm'>): Promise<SentimentRow> {
  const next = tx('sentiments').where({ studio_id: row.studio_id, stamp_set_id: row.stamp_set_id, reading_id: null }).select(tx.raw('coalesce(max(number), 0) + 1'));
  const [made] = await tx('sentiments').insert({ ...row, artwork: JSON.stringify(row.artwork), number: next, outlined: false, words_by: 'person', tags_by: 'person' }).returning<SentimentRow[]>(COLUMNS);
  return made;
}

export type SentimentChange = Partial<Pick<OutlinedRow, 'name' | 'words' | 'words_by' | 'tags' | 'tags_by' | 'owned' | 'trim_mm' | 'upright_deg' | 'width_mm' | 'height_mm' | 'artwork'>>;

export async function updateSentiment(tx: Knex, studioId: string, id: string, version: number, change: SentimentChange): Promise<SentimentRow | undefined> {
  const artwork = change.artwork ? { artwork: JSON.stringify(change.artwork) } : {};
  const [row] = await tx('sentiments').where({ studio_id: studioId, id, version, deleted_at: null })
    .update({ ...change, ...artwork, version: tx.raw('version + 1'), updated_at: tx.fn.now() }).returning<SentimentRow[]>(COLUMNS);
  return row;
}

/** Words that were recognised, where no person has written any in the meantime. */
export async function saveRecognised(tx: Knex, studioId: string, id: string, words: string, tags: string[]): Promise<void> {
  await tx('sentiments').where({ studio_id: studioId, id }).whereRaw(`words_by IS DISTINCT FROM 'person'`).update({ words, words_by: 'recognised', updated_at: tx.fn.now() });
  await tx('sentiments').where({ studio_id: studioId, id }).whereRaw(`tags_by IS DISTINCT FROM 'person'`).update({ tags, tags_by: 'recognised', updated_at: tx.fn.now() });
}

export async function setSentimentDeleted(tx: Knex, studioId: string, id: string, deleted: boolean): Promise<SentimentRow | undefined> {
  const query = tx('sentiments').where({ studio_id: studioId, id });
  const [row] = await (deleted ? query.whereNull('deleted_at') : query.whereNotNull('deleted_at'))
    .update({ deleted_at: deleted ? tx.fn.now() : null, updated_at: tx.fn.now(), version: tx.raw('version + 1') }).returning<SentimentRow[]>(COLUMNS);
  return row;
}
