/** What can be done with a picture: taken in, replaced, corrected, read again. Sentiments follow each change. */
import type { Knex } from 'knex';
import type { z } from 'zod';
import type { Picture, PictureResult, stampSetRoutes } from '../../contract/stamp-sets.ts';
import type { BodyOf } from '../../contract/route.ts';
import { newId } from '../../db/database.ts';
import type { Reading } from '../../engine/reading/types.ts';
import { probePicture } from '../../engine/reading/probe.ts';
import { ReadingError } from '../../engine/reading/reading-error.ts';
import { AppError, conflict, notFound, stale } from '../../errors/app-error.ts';
import type { Deps } from '../../feature.ts';
import type { UploadedFile } from '../../middleware/mount.ts';
import { READ_PICTURE, RECOGNISE_WORDS } from './stamp-sets.jobs.ts';
import { findPicture, insertPicture, lockPicture, readingOf, setPictureDeleted, toPicture, updatePicture } from './pictures.queries.ts';
import type { PictureRow } from './pictures.queries.ts';
import { followPicture, wishesOf } from './follow-picture.ts';
import { flipWishes, groupSentiments, resizeWishes } from './sentiment-follow.ts';
import type { GroupedSentiments } from './sentiment-follow.ts';
import { findStampSet, touchStampSet } from './stamp-sets.queries.ts';
import { sentimentsOfPicture, toSentiment } from './sentiments.queries.ts';

type Wish = BodyOf<(typeof stampSetRoutes)['PUT /studios/:studioId/stamp-sets/:id/pictures/:pictureId/corrections']>;
export interface PicturePlace { studioId: string; stampSetId: string; pictureId: string }
type By = { id: string };

export function createPictureService({ db, files, jobs, events, engine }: Deps) {
  const changed = (tx: Knex, studioId: string, stampSetId: string) => events.publish(tx, studioId, { type: 'changed', noun: 'stamp-sets', id: stampSetId });

  async function startReading(tx: Knex, row: PictureRow, by: By): Promise<PictureRow> {
    const jobId = await jobs.enqueue(tx, READ_PICTURE, {
      pictureId: row.id, stampSetId: row.stamp_set_id, fileKey: row.file_key, mirrored: row.mirrored, sheet: row.scale.kind === 'sheet' ? row.scale : null,
    }, { studioId: row.studio_id, subjectId: row.stamp_set_id, personId: by.id });
    const state = row.state === 'failed' ? 'waiting' : row.state;
    return (await updatePicture(tx, row.studio_id, row.id, { job_id: jobId, error: null, state }, { edit: false }))!;
  }

  async function readableSet(tx: Knex, studioId: string, stampSetId: string): Promise<void> {
    if (!(await findStampSet(tx, studioId, stampSetId))) throw notFound('This stamp set');
  }

  /** Takes the picture in and queues its reading, in the transaction at hand. The file is stored beforehand, see `store`. */
  async function addStored(tx: Knex.Transaction, place: { studioId: string; stampSetId: string }, stored: StoredPicture, mirrored: boolean, by: By): Promise<PictureRow> {
    const row = await insertPicture(tx, {
      id: newId(), studio_id: place.studioId, stamp_set_id: place.stampSetId, file_key: stored.fileKey, file_name: stored.fileName,
      width_px: stored.widthPx, height_px: stored.heightPx, mirrored,
    });
    return startReading(tx, row, by);
  }

  /** Judged from its header, then kept. Outside any transaction, since bytes may take their time to the store. */
  async function store(file: UploadedFile): Promise<StoredPicture> {
    const header = judge(file.bytes);
    return { fileKey: await files.put(file.bytes, `image/${header.type}`), fileName: file.name, widthPx: header.widthPx, heightPx: header.heightPx };
  }

  async function staleOr404(place: PicturePlace): Promise<AppError> {
    const now = await findPicture(db, place);
    return now ? stale('This picture', toPicture(now)) : notFound('This picture');
  }

  return {
    store,
    addStored,

    async add(place: { studioId: string; stampSetId: string }, file: UploadedFile, mirrored: boolean, by: By): Promise<Picture> {
      await readableSet(db, place.studioId, place.stampSetId);
      const stored = await store(file);
      return db.transaction(async (tx) => {
        await readableSet(tx, place.studioId, place.stampSetId);
        const row = await addStored(tx, place, stored, mirrored, by);
        await touchStampSet(tx, place.studioId, place.stampSetId);
        await changed(tx, place.studioId, place.stampSetId);
        return toPicture(row);
      });
    },

    async replace(place: PicturePlace, version: number, file: UploadedFile, by: By): Promise<Picture> {
      if (!(await findPicture(db, place))) throw notFound('This picture');
      const stored = await store(file);
      const answer = await db.transaction(async (tx) => {
        const row = await lockPicture(tx, place);
        if (!row || row.version !== version) return null;
        const wishes = resizeWishes(wishesOf(row), { widthPx: row.width_px, heightPx: row.height_px }, stored);
        const changedRow = await updatePicture(tx, place.studioId, row.id, {
          file_key: stored.fileKey, file_name: stored.fileName, width_px: stored.widthPx, height_px: stored.heightPx, view_file_key: null, small_file_key: null,
          scale: wishes.scale, corrections: wishes.corrections, grouping_gap: typeof row.grouping_gap === 'number' && row.reading?.mmPerPx === null ? 'auto' : row.grouping_gap,
          reading: null, state: 'waiting', looks_mirrored: false,
        }, { edit: true });
        const queued = await startReading(tx, changedRow!, by);
        await touchStampSet(tx, place.studioId, place.stampSetId);
        await changed(tx, place.studioId, place.stampSetId);
        return toPicture(queued);
      });
      if (!answer) throw await staleOr404(place);
      return answer;
    },

    async correct(place: PicturePlace, wish: Wish): Promise<PictureResult> {
      const before = await findPicture(db, place);
      if (!before || before.version !== wish.version) throw await staleOr404(place);
      const base = (await readingOf(db, place))?.reading;
      if (!base) throw conflict('not-read', 'This picture has not been read yet. Its sentiments can be corrected when it has.');
      // Grouped outside the transaction, which would hold its rows meanwhile; the version tells whether it still holds.
      const wishes = { scale: wish.scale, groupingGap: wish.groupingGap, corrections: wish.corrections };
      const grouped = base.parts.length <= AT_HAND_PARTS ? groupSentiments({ base, wishes }) : await engine.run<GroupedSentiments>('groupSentiments', { base, wishes });
      const answer = await db.transaction(async (tx) => {
        const row = await lockPicture(tx, place);
        if (!row || row.version !== wish.version || row.job_id !== before.job_id) return null;
        const next = await updatePicture(tx, place.studioId, row.id, { scale: wish.scale, grouping_gap: wish.groupingGap, corrections: wish.corrections }, { edit: true });
        await followPicture(tx, next!, grouped);
        await touchStampSet(tx, place.studioId, place.stampSetId);
        await changed(tx, place.studioId, place.stampSetId);
        return { picture: toPicture(next!), sentiments: (await sentimentsOfPicture(tx, place.studioId, row.id)).map(toSentiment) };
      });
      if (!answer) throw await staleOr404(place);
      return answer;
    },

    async readAgain(place: PicturePlace, wish: { version: number; mirrored?: boolean }, by: By): Promise<{ jobId: string }> {
      const jobId = await db.transaction(async (tx) => {
        const row = await lockPicture(tx, place);
        if (!row || row.stamp_set_id !== place.stampSetId || row.version !== wish.version) return null;
        const flips = wish.mirrored !== undefined && wish.mirrored !== row.mirrored;
        const wishes = wishesOf(row);
        const next = flips ? flipWishes(wishes, row.width_px) : wishes;
        const updated = await updatePicture(tx, place.studioId, row.id, { mirrored: wish.mirrored ?? row.mirrored, looks_mirrored: false, scale: next.scale, corrections: next.corrections, ...(flips ? FLIPPED : {}) }, { edit: true });
        const queued = await startReading(tx, updated!, by);
        await changed(tx, place.studioId, place.stampSetId);
        return queued.job_id!;
      });
      if (!jobId) throw await staleOr404(place);
      return { jobId };
    },

    async recogniseWords(place: PicturePlace, by: By): Promise<{ jobId: string }> {
      const row = await findPicture(db, place);
      if (!row) throw notFound('This picture');
      if (row.state !== 'read') throw conflict('not-read', 'This picture has not been read yet.');
      const payload = { pictureId: row.id, stampSetId: row.stamp_set_id, fileKey: row.file_key };
      return { jobId: await jobs.enqueue(db, RECOGNISE_WORDS, payload, { studioId: place.studioId, subjectId: place.stampSetId, personId: by.id, singletonKey: `words:${row.id}` }) };
    },

    async reading(place: PicturePlace): Promise<{ pictureId: string; version: number; reading: Reading }> {
      const row = await readingOf(db, place);
      if (!row) throw notFound('This picture');
      if (!row.reading) throw new AppError(404, 'not-read', 'This picture has not been read yet.');
      return { pictureId: place.pictureId, version: row.version, reading: row.reading };
    },

    async image(place: PicturePlace, size: 'view' | 'small'): Promise<Uint8Array> {
      const row = await findPicture(db, place);
      const key = size === 'small' ? row?.small_file_key : row?.view_file_key;
      if (!key) throw notFound('This picture');
      return files.get(key);
    },

    async setDeleted(place: PicturePlace, deleted: boolean): Promise<Picture> {
      return db.transaction(async (tx) => {
        const row = await setPictureDeleted(tx, place, deleted);
        if (!row) throw notFound('This picture');
        await touchStampSet(tx, place.studioId, place.stampSetId);
        await changed(tx, place.studioId, place.stampSetId);
        return toPicture(row);
      });
    },
  };
}

export type PictureService = ReturnType<typeof createPictureService>;
export interface StoredPicture { fileKey: string; fileName: string; widthPx: number; heightPx: number }

/** Up to so many parts grouping takes some 50 ms, less than waiting behind a picture that a worker thread is reading. */
const AT_HAND_PARTS = 150;

/** After a flip nothing in the old reading lies where it is drawn. */
const FLIPPED = { reading: null, state: 'waiting' as const };

/** The engine's refusals, as an answer to the upload itself: nothing is stored then. */
function judge(bytes: Uint8Array) {
  try {
    return probePicture(bytes);
  } catch (error) {
    if (!(error instanceof ReadingError)) throw error;
    throw new AppError(error.code === 'too-large' ? 413 : error.code === 'unsupported-type' ? 415 : 422, error.code, error.message, { errors: [{ path: 'picture', message: error.message }] });
  }
}

export type PictureBody = z.output<(typeof stampSetRoutes)['POST /studios/:studioId/stamp-sets/:id/pictures']['body']>;
