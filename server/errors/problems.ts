/** The one place that turns failures into answers: RFC 9457 problem details, with words for people and nothing of the inside. */
import { STATUS_CODES } from 'node:http';
import type { ErrorRequestHandler, RequestHandler } from 'express';
import type { Logger } from 'pino';
import type { Problem } from '../contract/shared.ts';
import { AppError, conflict, invalid } from './app-error.ts';

const away = (cause: unknown) =>
  new AppError(503, 'database-away', 'The data cannot be reached just now. What you typed is still here; try again in a moment.', { retryAfterSeconds: 5, cause });

/** PostgreSQL's codes that have a meaning for people: https://www.postgresql.org/docs/current/errcodes-appendix.html */
const POSTGRES: Record<string, (error: unknown) => AppError> = {
  '23505': () => conflict('already-there', 'That exists already.'),
  '23503': () => conflict('in-use', 'Something else refers to this, or what it refers to is gone.'),
  '23514': () => invalid('A figure is outside what is possible.'),
  '22003': () => invalid('A figure is outside what is possible.'),
  '22P02': () => invalid('Something that was sent cannot be read.'),
  '22021': () => invalid('A text holds characters that cannot be stored.'),
  '40001': () => conflict('at-once', 'Someone else changed the same thing at the same moment. Try again.'),
  '40P01': () => conflict('at-once', 'Someone else changed the same thing at the same moment. Try again.'),
  '53100': (cause) => new AppError(507, 'disk-full', 'The server has no room left. Nothing was saved.', { cause }),
  '53300': away, '55P03': away, '57014': away, '57P01': away, '57P02': away, '57P03': away,
};
const NETWORK = new Set(['ECONNREFUSED', 'ECONNRESET', 'EPIPE', 'ETIMEDOUT', 'ENOTFOUND', 'EAI_AGAIN', 'EHOSTUNREACH']);
/** Failures for which the driver and Knex give words, but no code. */
const CONNECTION_WORDS = /Connection terminated|Query read timeout|timeout expired|Timeout acquiring a connection|timeout exceeded when trying to connect|Connection ended|not queryable|aborted by pool|Client was closed/i;

export function translateError(error: unknown): AppError | null {
  if (error instanceof AppError) return error;
  if (!(error instanceof Error)) return null;
  const { code, type, status } = error as Error & { code?: unknown; type?: unknown; status?: unknown };
  if (typeof code === 'string') {
    if (code in POSTGRES) return POSTGRES[code](error);
    if (NETWORK.has(code) || /^08/.test(code)) return away(error);
    if (code === 'ENOSPC' || code === 'EDQUOT') return new AppError(507, 'disk-full', 'The server has no room left. Nothing was saved.', { cause: error });
  }
  if (CONNECTION_WORDS.test(error.message)) return away(error);
  // Errors of the body parser.
  if (type === 'entity.too.large') return new AppError(413, 'too-large', 'What was sent is too large.');
  if (type === 'entity.parse.failed') return invalid('What was sent is no valid JSON.');
  if (typeof type === 'string' && status === 400) return invalid('The request did not arrive whole.');
  if (error instanceof URIError) return invalid('The address cannot be read.');
  return null;
}

export function problemAnswers(log: Logger): ErrorRequestHandler {
  return (error, req, res, next) => {
    const known = translateError(error);
    if (!known || known.status >= 500) log.error({ err: error, method: req.method, path: req.path, requestId: res.locals.requestId }, 'request failed');
    if (res.headersSent) return next(error);
    const failure = known ?? new AppError(500, 'fault', `Something went wrong on our side. It has been noted under ${res.locals.requestId}; nothing was changed.`);
    const problem: Problem = {
      type: `urn:inkmuster:problem:${failure.code}`,
      title: STATUS_CODES[failure.status] ?? 'Error',
      status: failure.status,
      code: failure.code,
      detail: failure.message,
      ...(failure.errors ? { errors: failure.errors } : {}),
      ...(failure.current !== undefined ? { current: failure.current } : {}),
    };
    if (failure.retryAfterSeconds) res.set('Retry-After', String(failure.retryAfterSeconds));
    res.status(failure.status).set('Cache-Control', 'no-store').type('application/problem+json').send(JSON.stringify(problem));
  };
}

export const nothingHere: RequestHandler = () => {
  throw new AppError(404, 'not-found', 'There is nothing at this address.');
};
