/** Pictures of stamp sheets → sentiments in mm. */
export { applyScale, regroup } from './grouping.ts';
export { probePicture, MAX_FILE_BYTES, MAX_PIXELS, type PictureHeader, type PictureType } from './probe.ts';
export { readStampSheet } from './read-sheet.ts';
export { ReadingError, type ReadingErrorCode } from './reading-error.ts';
export { OCCASIONS, occasionTags, type Occasion } from './occasion-tags.ts';
export { recogniseWords, type RecognisedWords, type WordsOfReading } from './words.ts';
export type { Corrections, Reading, ReadOptions, ReadPart, ReadSentiment } from './types.ts';
