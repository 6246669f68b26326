/**
 * Binds a noun's handlers to its routes in the contract. Every request passes here in the same order: access, upload,
 * validation, handler, answer. A route in the contract without a handler does not compile.
 */
import type { NextFunction, Request, Response, Router } from 'express';
import type { z } from 'zod';
import { AppError, invalid } from '../errors/app-error.ts';
import type { BodyOf, ParamsOf, QueryOf, ResponseOf, RouteDefinition, RouteTable } from '../contract/route.ts';
import type { Role } from '../contract/shared.ts';

export interface Person { id: string; name: string; email: string }
export interface UploadedFile { name: string; bytes: Uint8Array }

/** What a handler is given. `person` is there on every route but those for anyone; `role` on studio routes. */
export interface Call<R> {
  params: ParamsOf<R>;
  query: QueryOf<R>;
  body: BodyOf<R>;
  files: UploadedFile[];
  person: Person;
  role: Role;
  idempotencyKey: string | null;
  req: Request;
  res: Response;
}

/** An answer that is no JSON. */
export class FileAnswer {
  readonly bytes: Uint8Array;
  readonly mediaType: string;
  readonly fileName: string | null;
  readonly maxAgeSeconds: number;
  constructor(bytes: Uint8Array, mediaType: string, options: { fileName?: string; maxAgeSeconds?: number } = {}) {
    this.bytes = bytes;
    this.mediaType = mediaType;
    this.fileName = options.fileName ?? null;
    this.maxAgeSeconds = options.maxAgeSeconds ?? 0;
  }
}
/** The handler has answered by itself (event streams, redirects). */
export const ANSWERED = Symbol('answered');

type Answer<R> = R extends { produces: string } ? FileAnswer | typeof ANSWERED : ResponseOf<R> | (ResponseOf<R> extends undefined ? void : never);
export type Handlers<T extends RouteTable> = { [K in keyof T]: (call: Call<T[K]>) => Promise<Answer<T[K]>> | Answer<T[K]> };

/** Steps that the application puts before a handler; see app.ts. */
export interface MountSteps {
  /** Decides who may call; sets `res.locals.person` and `res.locals.role`, or throws. The one role check. */
  access(route: RouteDefinition, req: Request, res: Response): Promise<void>;
  /** Takes in multipart files; sets `res.locals.files` and `req.body`, or throws. */
  upload(route: RouteDefinition, req: Request, res: Response): Promise<void>;
  /** Limits of costly calls; throws 429. */
  limit(route: RouteDefinition, req: Request, res: Response): Promise<void>;
}

export function mount<T extends RouteTable>(router: Router, table: T, handlers: Handlers<T>, steps: MountSteps): void {
  for (const [key, route] of Object.entries(table) as [string & keyof T, RouteDefinition][]) {
    const [method, path] = key.split(' ');
    const handler = handlers[key] as unknown as (call: Call<RouteDefinition>) => Promise<unknown>;
    const verb = method.toLowerCase() as 'get' | 'post' | 'put' | 'patch' | 'delete';
    router[verb](path, async (req: Request, res: Response, _next: NextFunction) => {
      await steps.access(route, req, res);
      await steps.limit(route, req, res);
      if (route.upload) await steps.upload(route, req, res);
      const call = {
        params: check(route.params, req.params, 'path'),
        query: check(route.query, req.query, 'query'),
        body: check(route.body, req.body, 'body'),
        files: (res.locals.files as UploadedFile[] | undefined) ?? [],
        person: res.locals.person as Person,
        role: res.locals.role as Role,
        idempotencyKey: idempotencyKey(req),
        req,
        res,
      };
      answer(res, route, await handler(call as Call<RouteDefinition>));
    });
  }
}

function check(schema: z.ZodType | undefined, value: unknown, where: 'path' | 'query' | 'body'): unknown {
  if (!schema) return undefined;
  const result = schema.safeParse(value ?? {});
  if (result.success) return result.data;
  if (where === 'path') throw new AppError(404, 'not-found', 'There is nothing at this address.');
  const errors = result.error.issues.map((issue) => ({ path: issue.path.join('.'), message: issue.message }));
  throw invalid(errors.length === 1 ? errors[0].message : 'Some of what was typed cannot be used.', errors);
}

function idempotencyKey(req: Request): string | null {
  const key = req.get('idempotency-key');
  if (key === undefined) return null;
  if (!/^[\w-]{8,80}$/.test(key)) throw invalid('An Idempotency-Key has 8 to 80 letters, digits, - or _.');
  return key;
}

function answer(res: Response, route: RouteDefinition, value: unknown): void {
  if (value === ANSWERED) return;
  if (value instanceof FileAnswer) {
    res.status(route.status ?? 200).type(value.mediaType).set('X-Content-Type-Options', 'nosniff');
    res.set('Cache-Control', value.maxAgeSeconds > 0 ? `private, max-age=${value.maxAgeSeconds}, immutable` : 'no-store');
    if (value.fileName !== null) res.attachment(value.fileName);
    else res.set('Content-Disposition', 'inline');
    res.type(value.mediaType).end(value.bytes);
    return;
  }
  if (!route.response) res.status(route.status ?? 204).end();
  else res.status(route.status ?? 200).json(value);
}
