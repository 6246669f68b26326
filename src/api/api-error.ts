/** A failure of a call, in words that can be shown. */
import type { Problem } from '../../server/contract/shared.ts';

export interface FieldProblem { path: string; message: string }

export class ApiError extends Error {
  /** 0 where no answer came. */
  readonly status: number;
  /** Stable, to tell failures apart: `offline`, `stale`, `invalid`, `not-found` … */
  readonly code: string;
  /** For people; the same as `message`. */
  readonly detail: string;
  /** Which fields of a form, and why. */
  readonly errors: FieldProblem[];
  /** After a stale edit: the row as it is now. */
  readonly current: unknown;

  constructor(problem: Pick<Problem, 'status' | 'code' | 'detail' | 'errors' | 'current'>, cause?: unknown) {
    super(problem.detail, { cause });
    this.name = 'ApiError';
    this.status = problem.status;
    this.code = problem.code;
    this.detail = problem.detail;
    this.errors = problem.errors ?? [];
    this.current = problem.current;
  }

  /** What to show beside a field, or null. Paths are those of the request's body: `pace.setup`. */
  fieldMessage(path: string): string | null {
    return this.errors.find((error) => error.path === path)?.message ?? null;
  }
}

export const offline = (cause: unknown) =>
  new ApiError({ status: 0, code: 'offline', detail: 'The server cannot be reached. What you typed is still here; try again when the connection is back.' }, cause);

/** Any thrown thing as a sentence for people; a fault of the page itself is not shown word by word. */
export function wordsOf(error: unknown): string {
  return error instanceof ApiError ? error.detail : 'Something in this page went wrong. Reload it and try again.';
}
