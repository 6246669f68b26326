/**
 * How the API is described: one table of routes a noun, keyed by method and path below `/api`. Types of requests and answers,
 * validation, access, the client's typed calls and the OpenAPI description all come from these tables and nowhere else.
 */
import type { z } from 'zod';

/**
 * Who may call. `helper`, `maker` and `owner` are the least role in the studio named by `:studioId`
 * (by `?studioId=` where the path has none); each includes those
 * after it in the order owner, maker, helper. Nothing else in the server decides about roles.
 */
export type Access = 'anyone' | 'signed-in' | 'helper' | 'maker' | 'owner';

export type Method = 'GET' | 'POST' | 'PUT' | 'PATCH' | 'DELETE';
export type RouteKey = `${Method} /${string}`;

export interface RouteDefinition {
  /** One line for the API description. */
  summary: string;
  access: Access;
  /** The studio named is one in the bin; everywhere else such a one is nowhere. */
  deletedStudio?: boolean;
  /** Path parameters; those named in the path and no others. Ids are UUIDs unless a schema says otherwise. */
  params?: z.ZodType;
  query?: z.ZodType;
  /** JSON body, or the text fields of a multipart one where `upload` is given. */
  body?: z.ZodType;
  /** Multipart: the file field and its limit. */
  upload?: { field: string; maxBytes: number; maxFiles?: number };
  /** Default 200; 204 where there is no `response`; 202 for a job that was queued. */
  status?: number;
  /** JSON answer. Absent: no content, or the `produces` type. */
  response?: z.ZodType;
  /** Media type of an answer that is not JSON: a picture, a PDF, `text/event-stream`. */
  produces?: string;
  /** Costly work, limited per person (see middleware/limits.ts). */
  costly?: boolean;
}

export type RouteTable = Record<RouteKey, RouteDefinition>;

/** Keeps the literal types of a table, so that the client and the handlers can be checked against it. */
export function routes<const T extends RouteTable>(table: T): T {
  return table;
}

type Out<S> = S extends z.ZodType ? z.output<S> : undefined;
type In<S> = S extends z.ZodType ? z.input<S> : undefined;
type Field<R, K extends string> = R extends Record<K, infer S> ? S : undefined;

/** What a handler receives, already validated. */
export type ParamsOf<R> = Out<Field<R, 'params'>>;
export type QueryOf<R> = Out<Field<R, 'query'>>;
export type BodyOf<R> = Out<Field<R, 'body'>>;
/** What a handler answers and a client gets. */
export type ResponseOf<R> = Out<Field<R, 'response'>>;
/** What a client sends: defaults may be left out. */
export type ParamsInput<R> = In<Field<R, 'params'>>;
export type QueryInput<R> = In<Field<R, 'query'>>;
export type BodyInput<R> = In<Field<R, 'body'>>;
