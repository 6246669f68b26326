/**
 * Takes in multipart files, held in memory and within limits. What the bytes are is decided from the bytes (storage/media-type.ts);
 * a client's file name is only ever shown.
 */
import type { Request, Response } from 'express';
import multer from 'multer';
import type { RouteDefinition } from '../contract/route.ts';
import { AppError, invalid } from '../errors/app-error.ts';
import type { UploadedFile } from './mount.ts';

const MIB = 1024 * 1024;
/** No byte for so long: the other side is gone or holds the line on purpose. */
const STALLED_MS = 30_000;
/** After a refusal the rest is read for a moment, so that a browser sees the answer instead of a broken line. */
const DRAIN_MS = 5_000;
/** Fields and part headers beside the files. */
const ROOM_BYTES = MIB;
/** Files wait in memory; more at a time than these and the next is asked to come back. */
const AT_ONCE = 12;

let underWay = 0;

export async function upload(route: RouteDefinition, req: Request, res: Response): Promise<void> {
  const { field, maxBytes, maxFiles = 1 } = route.upload!;
  if (!req.is('multipart/form-data')) throw new AppError(415, 'not-multipart', 'Send the file as multipart/form-data.');
  if (Number(req.get('content-length') ?? 0) > maxBytes * maxFiles + ROOM_BYTES) throw refuse(req, res, tooLarge(maxBytes, maxFiles));
  if (underWay >= AT_ONCE) throw refuse(req, res, new AppError(503, 'busy', 'Many files are arriving just now. Try again in a moment.', { retryAfterSeconds: 5 }));

  underWay += 1;
  try {
    await receive(req, res, multer({
      storage: multer.memoryStorage(),
      limits: { fileSize: maxBytes, files: maxFiles, fields: 40, parts: maxFiles + 40, fieldSize: 256 * 1024, fieldNameSize: 100, headerPairs: 50, fieldNestingDepth: 1 },
      defParamCharset: 'utf8',
    }).array(field, maxFiles), maxBytes, maxFiles);
  } finally {
    underWay -= 1;
  }
  const files = (req.files as Express.Multer.File[] | undefined) ?? [];
  if (files.length === 0 || files.some((file) => file.size === 0)) throw new AppError(400, 'no-file', files.length === 0 ? 'Choose a file.' : 'The file is empty.');
  res.locals.files = files.map((file): UploadedFile => ({ name: shownName(file.originalname), bytes: file.buffer }));
}

function receive(req: Request, res: Response, parse: ReturnType<multer.Multer['array']>, maxBytes: number, maxFiles: number): Promise<void> {
  return new Promise((resolve, reject) => {
    const stalled = () => reject(refuse(req, res, new AppError(408, 'stalled', 'The file stopped arriving. Check the connection and send it again.'), 0));
    let timer = setTimeout(stalled, STALLED_MS);
    let received = 0;
    const heard = (chunk: Buffer) => {
      clearTimeout(timer);
      timer = setTimeout(stalled, STALLED_MS);
      received += chunk.length;
      // The parser would read a body that does not say its length to its end before it complained.
      if (received > maxBytes * maxFiles + ROOM_BYTES) {
        settle();
        reject(refuse(req, res, tooLarge(maxBytes, maxFiles)));
      }
    };
    const gone = () => {
      settle();
      reject(broken());
    };
    const settle = () => {
      clearTimeout(timer);
      req.off('data', heard);
      res.off('close', gone);
    };
    // Broken off while we asked who it is: the parser, beginning later, would never hear of it.
    if (req.destroyed || res.closed) return gone();
    res.once('close', gone);
    parse(req, res, (error: unknown) => {
      settle();
      if (!error) return resolve();
      reject(error instanceof multer.MulterError ? refuse(req, res, translate(error, maxBytes, maxFiles)) : refuse(req, res, broken(error)));
    });
    req.on('data', heard);
  });
}

/** The answer closes the line; what still arrives is thrown away for a moment, then the socket goes. */
function refuse(req: Request, res: Response, error: AppError, drainMs = DRAIN_MS): AppError {
  res.set('Connection', 'close');
  req.unpipe();
  req.resume();
  res.once('finish', () => {
    if (!req.complete) setTimeout(() => req.socket.destroy(), drainMs).unref();
  });
  return error;
}

const broken = (cause?: unknown) => new AppError(400, 'broken-upload', 'The file did not arrive whole. Send it again.', { cause });

function translate(error: multer.MulterError, maxBytes: number, maxFiles: number): AppError {
  if (error.code === 'LIMIT_FILE_SIZE') return tooLarge(maxBytes, maxFiles);
  if (error.code === 'LIMIT_FILE_COUNT' || error.code === 'LIMIT_UNEXPECTED_FILE') return invalid(maxFiles === 1 ? 'Send one file.' : `Send at most ${maxFiles} files.`);
  return invalid('The form has more or longer fields than it should.');
}

function tooLarge(maxBytes: number, maxFiles: number): AppError {
  const limit = `${Math.floor(maxBytes / MIB)} MB`;
  return new AppError(413, 'too-large', maxFiles === 1 ? `The file is too large: at most ${limit}.` : `A file is too large: at most ${limit} each.`);
}

function shownName(name: string): string {
  return name.replace(/[\u0000-\u001f\u007f]/g, '').split(/[\\/]/).pop()!.trim().slice(0, 200) || 'file';
}
