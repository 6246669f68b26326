/** Queued work of stamp sets: reading a picture, recognising its words. */
import { z } from 'zod';
import { Scale } from '../../contract/stamp-sets.ts';
import type { Reading, ReadOptions } from '../../engine/reading/types.ts';
import type { Deps } from '../../feature.ts';
import type { JobDefinition } from '../../jobs/types.ts';
import { followPicture, wishesOf } from './follow-picture.ts';
import { lockPicture, readPicture, updatePicture } from './pictures.queries.ts';
import type { ReadPictureRow } from './pictures.queries.ts';
import { fittingCorrections, groupSentiments } from './sentiment-follow.ts';
import type { GroupedSentiments, Wishes } from './sentiment-follow.ts';
import { storedReading } from './stored-reading.ts';
import { saveWords } from './stamp-words.ts';
import type { RecognisedSentiments } from './stamp-words.ts';

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
/** And what the reading takes; the rest is grouping under the person's wishes. */
const READ_SHARE = 0.75;
const UNCORRECTED: Wishes = { scale: { kind: 'file' }, groupingGap: 'auto', corrections: { joins: [], splits: [], setAside: [] } };

interface ReadOutput {
  reading: Reading;
  views: { view: string; small: string };
  /** Made beforehand under the wishes as they stood. */
  wishes: Wishes;
  grouped: GroupedSentiments;
}

/** The row's wishes where this reading takes the place of what it had: they keep their places, and the gap its width. */
function wishesFor(row: ReadPictureRow, reading: Reading): Wishes {
  const wishes = wishesOf(row);
  const gapWasPx = typeof wishes.groupingGap === 'number' && row.reading !== null && row.reading.mmPerPx === null && wishes.scale.kind === 'file';
  return {
    scale: wishes.scale,
    groupingGap: gapWasPx && reading.mmPerPx !== null ? (wishes.groupingGap as number) * reading.mmPerPx : wishes.groupingGap,
    corrections: fittingCorrections(wishes.corrections, reading),
  };
}

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
      const reading = storedReading(await engine.run<Reading>('readStampSheet', { file, options }, { onProgress: (done, stage) => onProgress(VIEW_SHARE + READ_SHARE * done, stage) }));
      const row = await readPicture(db, { studioId, pictureId: payload.pictureId });
      const wishes = row ? wishesFor(row, reading) : UNCORRECTED;
      const grouped = await engine.run<GroupedSentiments>('groupSentiments', { base: reading, wishes }, { onProgress: () => undefined });
      return { reading, views, wishes, grouped };
    },

    async save(tx, payload, { reading, views, wishes: before, grouped }, { jobId, studioId }) {
      const row = await lockPicture(tx, { studioId, pictureId: payload.pictureId });
      // Replaced, read again or thrown away in the meantime: this reading is of no use any more.
      if (row?.job_id !== jobId) return { used: false };
      const wishes = wishesFor(row, reading);
      const saved = await updatePicture(tx, studioId, row.id, {
        reading, state: 'read', error: null, view_file_key: views.view, small_file_key: views.small,
        corrections: wishes.corrections, grouping_gap: wishes.groupingGap, width_px: reading.widthPx, height_px: reading.heightPx,
      }, { edit: true });
      // Somebody corrected the former reading while this one was made: seldom, and worth a moment of this thread.
      const found = JSON.stringify(wishes) === JSON.stringify(before) ? grouped : groupSentiments({ base: reading, wishes });
      await followPicture(tx, saved!, found);
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

export function recogniseWordsJob({ db, events }: Deps): JobDefinition<WordsPayload, RecognisedSentiments> {
  return {
    ...RECOGNISE_WORDS,
    payload: WordsPayload,
    timeLimitMs: WORDS_LIMIT_MS,

    async run(payload, { studioId, engine, onProgress }) {
      const stored = await readPicture(db, { studioId, pictureId: payload.pictureId });
      if (!stored?.reading || stored.file_key !== payload.fileKey) return { sentiments: [], looksMirrored: false };
      onProgress(0, 'Reading the words');
      return engine.run<RecognisedSentiments>('recogniseSentiments', { base: stored.reading, wishes: wishesOf(stored) });
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
