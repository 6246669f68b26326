/** Rows of `stamp_sets`, and the door by which other nouns read sentiments. */
import type { Knex } from 'knex';
import type { Mount, StampSetCard } from '../../contract/stamp-sets.ts';
import { containing, readPage } from '../../db/paging.ts';
import type { PageOf, PageRequest } from '../../db/paging.ts';
import { imageKey } from './pictures.queries.ts';

export { sentimentsByIds } from './sentiments.queries.ts';
export type { SentimentForPlan } from './sentiments.queries.ts';

export interface StampSetRow {
  id: string; studio_id: string; name: string; mount: Mount; storage_place: string; note: string;
  version: number; created_at: Date; updated_at: Date; deleted_at: Date | null;
}
const COLUMNS = ['id', 'studio_id', 'name', 'mount', 'storage_place', 'note', 'version', 'created_at', 'updated_at', 'deleted_at'];

type CardRow = StampSetRow & { sentiments: number; unscaled: number; pictures: number; tags: string[]; first_picture: { id: string; key: string | null } | null };

/** Sentiments that count: given by the grouping at hand, not set aside, not in the bin, nor is their picture. */
const COUNTED = `FROM sentiments s LEFT JOIN readings r ON r.studio_id = s.studio_id AND r.id = s.reading_id
  WHERE s.studio_id = stamp_sets.studio_id AND s.stamp_set_id = stamp_sets.id AND s.present AND NOT s.set_aside AND s.deleted_at IS NULL AND r.deleted_at IS NULL`;
const PICTURES = `FROM readings r WHERE r.studio_id = stamp_sets.studio_id AND r.stamp_set_id = stamp_sets.id AND r.deleted_at IS NULL`;

export async function listStampSets(db: Knex, studioId: string, query: PageRequest & { search?: string; tag?: string; bin?: boolean }): Promise<PageOf<StampSetCard>> {
  const list = db('stamp_sets').where('stamp_sets.studio_id', studioId).select([
    ...COLUMNS.map((column) => `stamp_sets.${column}`),
    db.raw(`(SELECT count(*) ${COUNTED}) AS sentiments`),
    db.raw(`(SELECT count(*) ${COUNTED} AND s.width_mm IS NULL) AS unscaled`),
    db.raw(`(SELECT count(*) ${PICTURES}) AS pictures`),
    db.raw(`(SELECT coalesce(array_agg(DISTINCT tag ORDER BY tag), '{}') FROM (SELECT unnest(s.tags) AS tag ${COUNTED}) AS t) AS tags`),
    db.raw(`(SELECT jsonb_build_object('id', r.id, 'key', r.view_file_key) ${PICTURES} ORDER BY r.small_file_key IS NULL, r.position LIMIT 1) AS first_picture`),
  ]);
  if (query.bin) list.whereNotNull('stamp_sets.deleted_at');
  else list.whereNull('stamp_sets.deleted_at');
  if (query.tag) list.whereRaw(`EXISTS (SELECT 1 ${COUNTED} AND ? = ANY (s.tags))`, [query.tag.toLowerCase()]);
  if (query.search) {
    const pattern = containing(query.search);
    list.where((q) => q.whereILike('stamp_sets.name', pattern).orWhereILike('stamp_sets.storage_place', pattern)
      .orWhereRaw(`EXISTS (SELECT 1 ${COUNTED} AND (s.words ILIKE ? OR s.name ILIKE ? OR array_to_string(s.tags, ' ') ILIKE ?))`, [pattern, pattern, pattern]));
  }
  const found = await readPage<CardRow>(db, list, query, {
    name: { sql: 'lower(stamp_sets.name)', type: 'text' },
    created: { sql: 'stamp_sets.created_at', type: 'timestamptz' },
    updated: { sql: 'stamp_sets.updated_at', type: 'timestamptz' },
    sentiments: { sql: `SELECT count(*) ${COUNTED}`, type: 'int' },
  }, 'name', 'stamp_sets.id');
  return { ...found, items: found.items.map(toCard) };
}

function toCard(row: CardRow): StampSetCard {
  return {
    ...stampSetFields(row), sentiments: row.sentiments, unscaled: row.unscaled, pictures: row.pictures, tags: row.tags,
    pictureId: row.first_picture?.id ?? null, imageKey: imageKey(row.first_picture?.key ?? null),
  };
}

export function stampSetFields(row: StampSetRow) {
  return {
    id: row.id, name: row.name, mount: row.mount, storagePlace: row.storage_place, note: row.note, version: row.version,
    createdAt: row.created_at.toISOString(), updatedAt: row.updated_at.toISOString(), deletedAt: row.deleted_at?.toISOString() ?? null,
  };
}

export function findStampSet(db: Knex, studioId: string, id: string): Promise<StampSetRow | undefined> {
  return db<StampSetRow>('stamp_sets').where({ studio_id: studioId, id, deleted_at: null }).first(COLUMNS);
}

export async function insertStampSet(tx: Knex, row: Pick<StampSetRow, 'id' | 'studio_id' | 'name' | 'mount' | 'storage_place' | 'note'>): Promise<StampSetRow> {
  const [made] = await tx('stamp_sets').insert(row).returning<StampSetRow[]>(COLUMNS);
  return made;
}

export async function updateStampSet(tx: Knex, studioId: string, id: string, version: number, change: Partial<Pick<StampSetRow, 'name' | 'mount' | 'storage_place' | 'note'>>): Promise<StampSetRow | undefined> {
  const [row] = await tx('stamp_sets').where({ studio_id: studioId, id, version, deleted_at: null })
    .update({ ...change, version: tx.raw('version + 1'), updated_at: tx.fn.now() }).returning<StampSetRow[]>(COLUMNS);
  return row;
}

/** Something in the set changed; it stands first where the list is sorted by that. */
export async function touchStampSet(tx: Knex, studioId: string, id: string): Promise<void> {
  await tx('stamp_sets').where({ studio_id: studioId, id }).update({ updated_at: tx.fn.now() });
}

export async function setStampSetDeleted(tx: Knex, studioId: string, id: string, deleted: boolean): Promise<StampSetRow | undefined> {
  const query = tx('stamp_sets').where({ studio_id: studioId, id });
  const [row] = await (deleted ? query.whereNull('deleted_at') : query.whereNotNull('deleted_at'))
    .update({ deleted_at: deleted ? tx.fn.now() : null, updated_at: tx.fn.now(), version: tx.raw('version + 1') }).returning<StampSetRow[]>(COLUMNS);
  return row;
}
