/** What can be wrong with a picture; the codes are part of the door and stay as they are. */
export type ReadingErrorCode = 'unsupported-type' | 'too-large' | 'damaged' | 'no-ink' | 'bad-scale';

/** A picture or a wish that cannot be read, with words for people. */
export class ReadingError extends Error {
  readonly code: ReadingErrorCode;

  constructor(code: ReadingErrorCode, message: string, cause?: unknown) {
    super(message, cause === undefined ? undefined : { cause });
    this.name = 'ReadingError';
    this.code = code;
  }
}

export const unsupportedType = () =>
  new ReadingError('unsupported-type', 'This is no picture that can be read. Send a PNG, JPEG, WebP, BMP, TIFF or GIF file.');
export const damaged = (cause?: unknown) =>
  new ReadingError('damaged', 'The picture file is damaged or incomplete. Save or scan it again and send the new file.', cause);
export const noInk = () =>
  new ReadingError('no-ink', 'No ink was found in this picture. Check that it shows stamped or printed sentiments on plain paper, in focus.');
