/**
 * Calls of the HTTP API, typed by the contract's route tables: `call('GET /studios/:studioId/members', { params: { studioId } })`.
 * Types only: no schema of the contract comes into the browser. Every failure is an `ApiError`, but a cancelled call's AbortError.
 */
import type { apiRoutes } from '../../server/contract/index.ts';
import type { BodyInput, ParamsInput, QueryInput, ResponseOf } from '../../server/contract/route.ts';
import { ApiError, offline } from './api-error.ts';
import { sendForm } from './upload.ts';

type Routes = typeof apiRoutes;
export type RouteName = keyof Routes & string;
export type Answer<K extends RouteName> = ResponseOf<Routes[K]>;
export type Body<K extends RouteName> = BodyInput<Routes[K]>;
export type Query<K extends RouteName> = QueryInput<Routes[K]>;

/** An option is asked for where the route has it, may be left out where all of it may, and is refused where the route has none. */
type Option<Name extends string, T> = [T] extends [undefined] ? Partial<Record<Name, undefined>> : Record<never, never> extends T ? Partial<Record<Name, T>> : Record<Name, T>;
/** The file field's name is in the table; the caller writes it and the compiler holds it to the table's. */
type UploadOption<R> = R extends { upload: { field: infer F } } ? { upload: { field: F; files: readonly File[]; onProgress?: (share: number) => void } } : { upload?: undefined };
export type CallOptions<K extends RouteName> = Option<'params', ParamsInput<Routes[K]>> & Option<'query', QueryInput<Routes[K]>> & Option<'body', BodyInput<Routes[K]>> & UploadOption<Routes[K]> & {
  signal?: AbortSignal;
  /** The same key makes a repeated call count once. */
  idempotencyKey?: string;
};
/** The second argument may be left out where nothing in it is asked for. */
type Arguments<K extends RouteName> = Record<never, never> extends CallOptions<K> ? [options?: CallOptions<K>] : [options: CallOptions<K>];

/** One shape for all, inside this file. */
interface Upload { field: string; files: readonly File[]; onProgress?: (share: number) => void }
interface Loose { params?: Record<string, unknown>; query?: Record<string, unknown>; body?: unknown; upload?: Upload; signal?: AbortSignal; idempotencyKey?: string }

let csrfToken: string | null = null;
let onSignedOut: () => void = () => undefined;

/** Comes with every answer about the session, and goes back with every change. */
export function setCsrfToken(token: string | null): void {
  csrfToken = token;
}
/** Told when an answer says that nobody is signed in any more. */
export function whenSignedOut(told: () => void): void {
  onSignedOut = told;
}

export async function call<K extends RouteName>(route: K, ...[options]: Arguments<K>): Promise<Answer<K>> {
  const { params, query, body, upload, signal, idempotencyKey } = (options ?? {}) as Loose;
  const [method, path] = route.split(' ');
  const headers: Record<string, string> = { Accept: 'application/json' };
  if (method !== 'GET' && csrfToken !== null) headers['X-CSRF-Token'] = csrfToken;
  if (idempotencyKey !== undefined) headers['Idempotency-Key'] = idempotencyKey;
  const address = addressOf(path, params, query);
  if (upload) {
    const { status, text } = await sendForm(method, address, headers, form(upload, body), upload.onProgress, signal);
    return read(status, text) as Answer<K>;
  }
  if (body !== undefined) headers['Content-Type'] = 'application/json';
  const { status, text } = await send(address, { method, headers, body: body === undefined ? undefined : JSON.stringify(body), signal, credentials: 'same-origin' });
  return read(status, text) as Answer<K>;
}

/** The address of a route, for pictures, downloads and links. */
export function addressOf(path: string, params: Record<string, unknown> = {}, query: Record<string, unknown> = {}): string {
  const filled = path.replace(/:(\w+)/g, (_all, name: string) => {
    if (params[name] === undefined) throw new Error(`${path} needs ${name}.`);
    return encodeURIComponent(String(params[name]));
  });
  const asked = new URLSearchParams();
  for (const [name, value] of Object.entries(query)) {
    if (value !== undefined && value !== null && value !== '') asked.set(name, String(value));
  }
  return `/api${filled}${asked.size > 0 ? `?${asked}` : ''}`;
}

async function send(address: string, init: RequestInit): Promise<{ status: number; text: string }> {
  try {
    const response = await fetch(address, init);
    return { status: response.status, text: await response.text() };
  } catch (error) {
    if (init.signal?.aborted) throw error;
    throw offline(error);
  }
}

function read(status: number, text: string): unknown {
  const answer = parse(text);
  if (status >= 200 && status < 300) return answer;
  const problem = (typeof answer === 'object' && answer !== null ? answer : {}) as { code?: string; detail?: string; errors?: []; current?: unknown };
  if (status === 401 && problem.code === 'not-signed-in') onSignedOut();
  throw new ApiError({
    status,
    code: problem.code ?? 'unknown',
    // A proxy's own page, or a server in mid-start: no words of ours came.
    detail: problem.detail ?? `The server answered with an error (${status}). Nothing was changed; try again in a moment.`,
    errors: problem.errors,
    current: problem.current,
  });
}

function parse(text: string): unknown {
  if (text === '') return undefined;
  try {
    return JSON.parse(text) as unknown;
  } catch {
    return undefined;
  }
}

function form({ field, files }: Upload, body: unknown): FormData {
  const data = new FormData();
  // Text first: a server that reads in order then knows what the file is for.
  for (const [name, value] of Object.entries((body ?? {}) as Record<string, unknown>)) {
    if (value !== undefined && value !== null) data.append(name, typeof value === 'object' ? JSON.stringify(value) : String(value));
  }
  for (const file of files) data.append(field, file, file.name);
  return data;
}
