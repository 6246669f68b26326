/** Words and occasions of a picture's sentiments as the person has grouped them. Runs in a worker thread. */
import type { Control } from '../../engine/control.ts';
import { occasionTags } from '../../engine/reading/occasion-tags.ts';
import type { Reading } from '../../engine/reading/types.ts';
import { recogniseWords } from '../../engine/reading/words.ts';
import { correctedReading, placeOf } from './sentiment-follow.ts';
import type { Wishes } from './sentiment-follow.ts';
import type { RecognisedSentiments } from './stamp-words.ts';

export async function recogniseSentiments({ base, wishes }: { base: Reading; wishes: Wishes }, control: Control): Promise<RecognisedSentiments> {
  const reading = correctedReading(base, wishes);
  const words = await recogniseWords(reading, control);
  return {
    sentiments: reading.sentiments.map((sentiment, i) => ({ place: placeOf(sentiment.boxPx, reading), text: words.sentiments[i].text, tags: occasionTags(words.sentiments[i].text) })),
    looksMirrored: words.readsBetterFlipped,
  };
}
