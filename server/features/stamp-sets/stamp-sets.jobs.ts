/** Queued work of stamp sets: reading a picture, recognising its words. */
import { z } from 'zod';
import { Scale } from '../../contract/stamp-sets.ts';
import type { Reading, ReadOptions } from '../../engine/reading/types.ts';
import type { Deps } from '../../feature.ts';
import type { JobDefinition } from '../../jobs/types.ts';
import { followPicture } from './follow-picture.ts';
import { findPicture, lockPicture, updatePicture } from './pictures.queries.ts';
import { correctedReading, fittingCorrections, placeOf } from './sentiment-follow.ts';
import { storedReading } from './stored-reading.ts';
import { saveWords } from './stamp-words.ts';
import type { RecognisedWords } from './stamp-words.ts';

const ReadPayload = z.object({ pictureId: z.uuid(), stampSetId: z.uuid(), fileKey: z.string(), mirrored: z.boolean(), sheet: Scale.nullable() });
const WordsPayload = z.object({ pictureId: z.uuid(), stampSetId: z.uuid(), fileKey: z.string() });
type ReadPayload = z.output<typeof ReadPayload>;
type WordsPayload = z.output<typeof WordsPayload>;

export const READ_PICTURE = { kind: 'read-picture' } as const;
export const RECOGNISE_WORDS = { kind: 'recognise-words' } as const;

/** The largest picture takes some ten seconds on a busy machine. */
const READ_LIMIT_MS = 120_000;
const WORDS_LIMIT_MS = 180_000;
/** Share of the bar that the picture to look at takes. */
const VIEW_SHARE = 0.2;

interface ReadOutput { reading: Reading; views: { view: string; small: string } }

export function readPictureJob({ db, files, jobs, events }: Deps): JobDefinition<ReadPayload, ReadOutput> {
  return {
    ...READ_PICTURE,
    payload: ReadPayload,
    timeLimitMs: READ_LIMIT_MS,

    async run(payload, { jobId, studioId, engine, onProgress }) {
      const file = await files.get(payload.fileKey);
      onProgress(0, 'Opening the picture');
      const made = await engine.run<{ view: Uint8Array; small: Uint8Array }>('pictureViews', { file }, { onProgress: () => undefined });
      const views = { view: await files.put(made.view, 'image/jpeg'), small: await files.put(made.small, 'image/jpeg') };
      // The picture can be looked at while it is read; a reading that was overtaken shows nothing.
      await db.transaction(async (tx) => {
        const row = await lockPicture(tx, { studioId, pictureId: payload.pictureId });
        if (row?.job_id !== jobId) return;
        await updatePicture(tx, studioId, row.id, { view_file_key: views.view, small_file_key: views.small }, { edit: false });
        await events.publish(tx, studioId, { type: 'changed', noun: 'stamp-sets', id: payload.stampSetId });
      });
      const options: ReadOptions = {
        mirrored: payload.mirrored,
        ...(payload.sheet?.kind === 'sheet' ? { sheet: { cornersPx: payload.sheet.cornersPx, widthMm: payload.sheet.widthMm, heightMm: payload.sheet.heightMm } } : {}),
      };
      const reading = await engine.run<Reading>('readStampSheet', { file, options }, { onProgress: (done, stage) => onProgress(VIEW_SHARE + (1 - VIEW_SHARE) * done, stage) });
      return { reading: storedReading(reading), views };
    },

    async save(tx, payload, { reading, views }, { jobId, studioId }) {
      const row = await lockPicture(tx, { studioId, pictureId: payload.pictureId });
      // Replaced, read again or thrown away in the meantime: this reading is of no use any more.
      if (row?.job_id !== jobId) return { used: false };
      const gapWasPx = typeof row.grouping_gap === 'number' && row.reading !== null && row.reading.mmPerPx === null && row.scale.kind === 'file';
      const gap = gapWasPx && reading.mmPerPx !== null ? (row.grouping_gap as number) * reading.mmPerPx : row.grouping_gap;
      const saved = await updatePicture(tx, studioId, row.id, {
        reading, state: 'read', error: null, view_file_key: views.view, small_file_key: views.small,
        corrections: fittingCorrections(row.corrections, reading), grouping_gap: gap, width_px: reading.widthPx, height_px: reading.heightPx,
      }, { edit: true });
      const found = await followPicture(tx, saved!, reading);
      const person = await tx('jobs').where({ id: jobId }).first<{ person_id: string }>('person_id');
      await jobs.enqueue(tx, RECOGNISE_WORDS, { pictureId: row.id, stampSetId: row.stamp_set_id, fileKey: row.file_key }, { studioId, subjectId: row.stamp_set_id, personId: person.person_id, singletonKey: `words:${row.id}` });
      await events.publish(tx, studioId, { type: 'changed', noun: 'stamp-sets', id: row.stamp_set_id });
      return { used: true, pictureId: row.id, sentiments: found.sentiments.length };
    },

    async onFailed(tx, payload, error, { jobId, studioId }) {
      const row = await lockPicture(tx, { studioId, pictureId: payload.pictureId });
      if (row?.job_id !== jobId) return;
      // An earlier reading of the same picture stands.
      await updatePicture(tx, studioId, row.id, { state: row.reading ? 'read' : 'failed', error }, { edit: false });
      await events.publish(tx, studioId, { type: 'changed', noun: 'stamp-sets', id: row.stamp_set_id });
    },
  };
}

export function recogniseWordsJob({ db, files, events }: Deps): JobDefinition<WordsPayload, RecognisedWords> {
  return {
    ...RECOGNISE_WORDS,
    payload: WordsPayload,
    timeLimitMs: WORDS_LIMIT_MS,

    async run(payload, { studioId, engine, onProgress }) {
      const row = await findPicture(db, { studioId, stampSetId: payload.stampSetId, pictureId: payload.pictureId });
      const stored = await db.transaction((tx) => lockPicture(tx, { studioId, pictureId: payload.pictureId }));
      if (!row || !stored?.reading || row.file_key !== payload.fileKey) return { sentiments: [], looksMirrored: false };
      onProgress(0, 'Reading the words');
      const reading = correctedReading(stored.reading, { scale: stored.scale, groupingGap: stored.grouping_gap, corrections: stored.corrections });
      const { words, looksMirrored } = await engine.run<{ words: { text: string; tags: string[] }[]; looksMirrored: boolean }>(
        'recogniseWords', { file: await files.get(payload.fileKey), reading, options: { mirrored: stored.mirrored } },
      );
      return { sentiments: reading.sentiments.map((sentiment, i) => ({ place: placeOf(sentiment.boxPx, reading), ...words[i] })), looksMirrored };
    },

    async save(tx, payload, output, { studioId }) {
      const row = await lockPicture(tx, { studioId, pictureId: payload.pictureId });
      if (!row || row.file_key !== payload.fileKey) return { named: 0 };
      if (row.looks_mirrored !== output.looksMirrored) await updatePicture(tx, studioId, row.id, { looks_mirrored: output.looksMirrored }, { edit: false });
      const named = await saveWords(tx, studioId, row.id, output);
      await events.publish(tx, studioId, { type: 'changed', noun: 'stamp-sets', id: row.stamp_set_id });
      return { named };
    },
  };
}
