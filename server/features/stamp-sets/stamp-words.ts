/** Puts recognised words to the sentiments that stand where they were read. */
import type { Knex } from 'knex';
import { matchBoxes } from '../../engine/geometry/box-match.ts';
import type { Box } from '../../engine/geometry/types.ts';
import { saveRecognised, sentimentsOfPicture } from './sentiments.queries.ts';

/** `looksMirrored`: the words read better the other way round. */
export interface RecognisedSentiments { sentiments: { place: Box; text: string; tags: string[] }[]; looksMirrored: boolean }

/** The grouping may have changed while the words were read: a sentiment that is not nearly the same any more keeps what it has. */
const STILL_THE_SAME = 0.8;

export async function saveWords(tx: Knex, studioId: string, readingId: string, found: RecognisedSentiments): Promise<number> {
  const rows = (await sentimentsOfPicture(tx, studioId, readingId)).filter((row) => row.place !== null);
  const partner = matchBoxes(found.sentiments.map(({ place }) => place), rows.map((row) => row.place!), STILL_THE_SAME);
  let named = 0;
  for (const [i, row] of rows.entries()) {
    const words = partner[i] === null ? null : found.sentiments[partner[i]];
    if (!words || words.text === '' || row.words_by === 'person') continue;
    await saveRecognised(tx, studioId, row.id, words.text.slice(0, 500), words.tags);
    named += 1;
  }
  return named;
}
