/** How often something may be done, counted in PostgreSQL so that it holds over all server processes. */
import type { Request, Response } from 'express';
import type { Knex } from 'knex';
import { RateLimiterPostgres, RateLimiterRes } from 'rate-limiter-flexible';
import type { RouteDefinition } from '../contract/route.ts';
import { AppError } from '../errors/app-error.ts';
import type { Person } from './mount.ts';

/** Readings, plans, pages: far more than a busy table needs, far less than what would fill the queue. */
const COSTLY = { points: 120, durationSeconds: 300 };

export function createLimiter(db: Knex, name: string, points: number, durationSeconds: number): RateLimiterPostgres {
  return new RateLimiterPostgres({ storeClient: db, storeType: 'knex', tableName: 'rate_limits', tableCreated: true, clearExpiredByTimeout: false, keyPrefix: name, points, duration: durationSeconds });
}

/** Counts one more; throws 429 with the time to wait where that is one too many. */
export async function consume(limiter: RateLimiterPostgres, key: string, words: string): Promise<void> {
  try {
    await limiter.consume(key);
  } catch (reason) {
    if (reason instanceof RateLimiterRes) throw tooMany(words, reason.msBeforeNext);
    throw reason;
  }
}

export function tooMany(words: string, waitMs: number): AppError {
  const seconds = Math.max(1, Math.ceil(waitMs / 1000));
  const wait = seconds < 90 ? `${seconds} seconds` : `${Math.ceil(seconds / 60)} minutes`;
  return new AppError(429, 'too-many', `${words} Try again in ${wait}.`, { retryAfterSeconds: seconds });
}

export function createCostlyLimit(db: Knex) {
  const limiter = createLimiter(db, 'costly', COSTLY.points, COSTLY.durationSeconds);
  return async function limit(route: RouteDefinition, req: Request, res: Response): Promise<void> {
    if (!route.costly) return;
    const person = res.locals.person as Person | undefined;
    await consume(limiter, person?.id ?? req.ip ?? 'unknown', 'That was a lot of work in a short time.');
  };
}
