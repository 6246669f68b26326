/**
 * The words of sentiments, by text recognition (Tesseract), as proposals; and whether the picture reads better flipped, as faces of stamps do.
 *
 * Input: a reading; not mutated. Output: for every sentiment, in the reading's order, words (empty where none are made out) with a confidence from 0 to 100. The
 * sentiments are drawn anew from their outlines, level and clean, so that paper and light play no part and the picture is not decoded again.
 * Language data and program come from this disk's packages; nothing is kept and nothing fetched. Recognition runs in a thread of
 * tesseract.js's own, ended before the answer. Cost: a tenth to half a second per sentiment.
 */
import { createRequire } from 'node:module';
import { dirname, join } from 'node:path';
import type { Control } from '../control.ts';
import { mapOutline, rotatePoint } from '../geometry/transform.ts';
import type { Outline } from '../geometry/types.ts';
import { rasterOutline, type GreyPicture } from './raster-outline.ts';
import type { Reading, ReadSentiment } from './types.ts';

export interface RecognisedWords { text: string; confidence: number }
export interface WordsOfReading {
  sentiments: RecognisedWords[];
  /** The picture most likely shows stamps' faces, or was flipped for nothing: reading it the other way round is proposed. */
  readsBetterFlipped: boolean;
}

/** Type of about this height in px is what Tesseract reads best. */
const LINE_PX = 60, MOST_PX = 1600;
/** Below this Tesseract guesses at ornaments. */
const LEAST_CONFIDENCE = 45;
/** This many sentiments, those with most ink, are tried both ways round. */
const TRIED_FLIPPED = 6;
/** Mean confidence by which the flipped words must be better. */
const CLEARLY_BETTER = 15;
/** One uniform block of text; Tesseract's own number for that page layout. */
const BLOCK_OF_TEXT = '6';

export async function recogniseWords(reading: Reading, control?: Control): Promise<WordsOfReading> {
  const { createWorker, OEM } = await import('tesseract.js');
  const require = createRequire(import.meta.url);
  const data = join(dirname(require.resolve('@tesseract.js-data/eng/package.json')), '4.0.0_best_int');
  const worker = await createWorker('eng', OEM.LSTM_ONLY, { langPath: data, gzip: true, cacheMethod: 'none', errorHandler: () => undefined });
  try {
    await worker.setParameters({ tessedit_pageseg_mode: BLOCK_OF_TEXT as never });
    const recognise = async (picture: GreyPicture) => {
      const { data: found } = await worker.recognize(Buffer.from(portableGreyMap(picture)));
      return { text: tidy(found.text), confidence: found.confidence };
    };
    const outlines = reading.sentiments.map((sentiment) => levelOutline(reading, sentiment));
    const tried = mostInk(reading.sentiments);
    const sentiments: RecognisedWords[] = [];
    let straight = 0, flipped = 0;
    for (const [i, outline] of outlines.entries()) {
      control?.onProgress?.(i / outlines.length, 'reading words');
      const words = await recognise(drawn(outline, false));
      sentiments.push(words.confidence >= LEAST_CONFIDENCE ? words : { text: '', confidence: words.confidence });
      if (!tried.has(i)) continue;
      straight += worth(words);
      flipped += worth(await recognise(drawn(outline, true)));
    }
    return { sentiments, readsBetterFlipped: tried.size > 0 && (flipped - straight) / tried.size > CLEARLY_BETTER };
  } finally {
    await worker.terminate();
  }
}

/** Confidence counts only where there are letters enough to be a word. */
function worth({ text, confidence }: RecognisedWords): number {
  return (text.match(/\p{L}/gu) ?? []).length >= 2 ? confidence : 0;
}

function mostInk(sentiments: readonly ReadSentiment[]): Set<number> {
  const order = sentiments.map((_, i) => i).sort((a, b) => sentiments[b].boxPx.w * sentiments[b].boxPx.h - sentiments[a].boxPx.w * sentiments[a].boxPx.h);
  return new Set(order.slice(0, TRIED_FLIPPED));
}

/** In mm where a scale is known, else turned level in px. */
function levelOutline(reading: Reading, sentiment: ReadSentiment): Outline {
  if (sentiment.outline) return sentiment.outline;
  const own = new Set(sentiment.partIds);
  const rings = reading.parts.filter((part) => own.has(part.id)).flatMap((part) => part.outlinePx.rings);
  return mapOutline({ rings }, (p) => rotatePoint(p, -sentiment.angleDeg));
}

function drawn(outline: Outline, mirrored: boolean): GreyPicture {
  const ys = outline.rings.flat().map((p) => p.y), xs = outline.rings.flat().map((p) => p.x);
  const height = Math.max(...ys) - Math.min(...ys), width = Math.max(...xs) - Math.min(...xs);
  // Sentiments have one to three lines; twice the line's height serves all of them.
  return rasterOutline(outline, Math.min((2 * LINE_PX) / height, MOST_PX / width), mirrored);
}

/** Netpbm's P5, the plainest format that Tesseract takes. */
function portableGreyMap({ width, height, values }: GreyPicture): Uint8Array {
  const header = new TextEncoder().encode(`P5\n${width} ${height}\n255\n`);
  const file = new Uint8Array(header.length + values.length);
  file.set(header);
  file.set(values, header.length);
  return file;
}

/** Line breaks become spaces; what is neither letter nor usual mark of a greeting goes. */
function tidy(text: string): string {
  return text.replace(/[^\p{L}\p{N}&!?.,:;'’"“”\s-]/gu, '').replace(/\s+/g, ' ').replace(/^[\s.,:;-]+|[\s,:;-]+$/g, '').trim();
}
