/** Rows of `readings`: pictures of stamp sets and what was read in them. */
import type { Knex } from 'knex';
import type { Picture, Scale } from '../../contract/stamp-sets.ts';
import type { Corrections, Reading } from '../../engine/reading/types.ts';

export interface PictureRow {
  id: string; studio_id: string; stamp_set_id: string; position: number;
  file_key: string; file_name: string; view_file_key: string | null; small_file_key: string | null;
  width_px: number; height_px: number; mirrored: boolean; looks_mirrored: boolean;
  scale: Scale; grouping_gap: 'auto' | number; corrections: Corrections;
  state: Picture['state']; error: { code: string; message: string } | null; job_id: string | null;
  version: number; created_at: Date; updated_at: Date; deleted_at: Date | null;
}
export type ReadPictureRow = PictureRow & { reading: Reading | null };

/** All but the reading itself, which can be megabytes. */
const COLUMNS = [
  'id', 'studio_id', 'stamp_set_id', 'position', 'file_key', 'file_name', 'view_file_key', 'small_file_key', 'width_px', 'height_px', 'mirrored', 'looks_mirrored',
  'scale', 'grouping_gap', 'corrections', 'state', 'error', 'job_id', 'version', 'created_at', 'updated_at', 'deleted_at',
];

export const NO_CORRECTIONS: Corrections = { joins: [], splits: [], setAside: [] };

export function toPicture(row: PictureRow): Picture {
  return {
    id: row.id, stampSetId: row.stamp_set_id, position: row.position, fileName: row.file_name, widthPx: row.width_px, heightPx: row.height_px,
    mirrored: row.mirrored, looksMirrored: row.looks_mirrored, scale: row.scale, groupingGap: row.grouping_gap, corrections: row.corrections,
    state: row.state, error: row.error, jobId: row.job_id, imageKey: imageKey(row.view_file_key), version: row.version, updatedAt: row.updated_at.toISOString(),
  };
}

/** Storage keys stay inside; a part of one is enough to tell pictures apart. */
export const imageKey = (viewFileKey: string | null): string | null => (viewFileKey === null ? null : viewFileKey.replace(/[^\w-]/g, '').slice(-24));

export async function picturesOfSet(db: Knex, studioId: string, stampSetId: string): Promise<PictureRow[]> {
  return db('readings').select(COLUMNS).where({ studio_id: studioId, stamp_set_id: stampSetId, deleted_at: null }).orderBy(['position', 'id']);
}

interface PlaceOfPicture { studioId: string; stampSetId: string; pictureId: string }
const placed = ({ studioId, stampSetId, pictureId }: PlaceOfPicture) => ({ studio_id: studioId, stamp_set_id: stampSetId, id: pictureId });

export function findPicture(db: Knex, place: PlaceOfPicture, options: { deleted?: boolean } = {}): Promise<PictureRow | undefined> {
  const query = db<PictureRow>('readings').where(placed(place));
  return (options.deleted ? query.whereNotNull('deleted_at') : query.whereNull('deleted_at')).first(COLUMNS);
}

/** With its reading. */
export function readPicture(db: Knex, place: { studioId: string; pictureId: string }): Promise<ReadPictureRow | undefined> {
  return db<ReadPictureRow>('readings').where({ studio_id: place.studioId, id: place.pictureId, deleted_at: null }).first([...COLUMNS, 'reading']);
}

/** The same, held until the transaction ends, so that sentiments follow one change at a time. */
export function lockPicture(tx: Knex, place: { studioId: string; pictureId: string }): Promise<ReadPictureRow | undefined> {
  return tx<ReadPictureRow>('readings').where({ studio_id: place.studioId, id: place.pictureId, deleted_at: null }).forUpdate().first([...COLUMNS, 'reading']);
}

export async function readingOf(db: Knex, place: PlaceOfPicture): Promise<{ version: number; reading: Reading | null } | undefined> {
  return db<ReadPictureRow>('readings').where({ ...placed(place), deleted_at: null }).first('version', 'reading');
}

export async function insertPicture(tx: Knex, row: Pick<PictureRow, 'id' | 'studio_id' | 'stamp_set_id' | 'file_key' | 'file_name' | 'width_px' | 'height_px' | 'mirrored'>): Promise<PictureRow> {
  const [made] = await tx('readings')
    .insert({
      ...row,
      position: tx('readings').where({ studio_id: row.studio_id, stamp_set_id: row.stamp_set_id }).select(tx.raw('coalesce(max(position), 0) + 1')),
      scale: JSON.stringify({ kind: 'file' }), grouping_gap: JSON.stringify('auto'), corrections: JSON.stringify(NO_CORRECTIONS),
    })
    .returning<PictureRow[]>(COLUMNS);
  return made;
}

export type PictureChange = Partial<Omit<ReadPictureRow, 'id' | 'studio_id' | 'stamp_set_id' | 'version' | 'created_at' | 'updated_at'>>;
const JSON_COLUMNS = new Set(['scale', 'grouping_gap', 'corrections', 'reading', 'error']);

/** `version` given: only while the row still has it. A change of what a person can edit counts as one; news of a job does not. */
export async function updatePicture(tx: Knex, studioId: string, id: string, change: PictureChange, options: { version?: number; edit: boolean }): Promise<PictureRow | undefined> {
  const columns = Object.fromEntries(Object.entries(change).map(([key, value]) => [key, JSON_COLUMNS.has(key) && value !== null ? JSON.stringify(value) : value]));
  const query = tx('readings').where({ studio_id: studioId, id });
  if (options.version !== undefined) query.where({ version: options.version });
  const [row] = await query
    .update({ ...columns, updated_at: tx.fn.now(), ...(options.edit ? { version: tx.raw('version + 1') } : {}) })
    .returning<PictureRow[]>(COLUMNS);
  return row;
}

/** The pictures of a set that lie in the bin by themselves stay there when the set comes back. */
export async function setPictureDeleted(tx: Knex, place: PlaceOfPicture, deleted: boolean): Promise<PictureRow | undefined> {
  const query = tx('readings').where(placed(place));
  const [row] = await (deleted ? query.whereNull('deleted_at') : query.whereNotNull('deleted_at'))
    .update({ deleted_at: deleted ? tx.fn.now() : null, updated_at: tx.fn.now(), version: tx.raw('version + 1') })
    .returning<PictureRow[]>(COLUMNS);
  return row;
}
