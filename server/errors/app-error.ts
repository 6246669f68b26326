/** Expected failures, each with a stable code, a status and words for people. Anything else is a fault of the program. */

export interface FieldError { path: string; message: string }

export class AppError extends Error {
  readonly status: number;
  readonly code: string;
  readonly errors?: FieldError[];
  /** On a stale edit: the row as it is now. */
  readonly current?: unknown;
  readonly retryAfterSeconds?: number;

  constructor(status: number, code: string, message: string, more: { errors?: FieldError[]; current?: unknown; retryAfterSeconds?: number; cause?: unknown } = {}) {
    super(message, { cause: more.cause });
    this.name = 'AppError';
    this.status = status;
    this.code = code;
    this.errors = more.errors;
    this.current = more.current;
    this.retryAfterSeconds = more.retryAfterSeconds;
  }
}

export const invalid = (message: string, errors?: FieldError[]) => new AppError(400, 'invalid', message, { errors });
export const notSignedIn = () => new AppError(401, 'not-signed-in', 'Sign in to go on.');
export const forbidden = (message: string) => new AppError(403, 'forbidden', message);
/** Also for what exists in another studio: whether it exists is nobody else's business. */
export const notFound = (what: string) => new AppError(404, 'not-found', `${what} is not here. It may have been deleted.`);
export const stale = (what: string, current: unknown) =>
  new AppError(409, 'stale', `${what} was changed by someone else in the meantime. Nothing was overwritten.`, { current });
export const conflict = (code: string, message: string) => new AppError(409, code, message);
