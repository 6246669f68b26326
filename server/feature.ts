/** What a noun gives to the application, and what it is given. */
import type { Router } from 'express';
import type { Knex } from 'knex';
import type { Logger } from 'pino';
import type { Config } from './config.ts';
import type { RouteTable } from './contract/route.ts';
import type { Events } from './events/types.ts';
import type { EnginePool, JobDefinition, Jobs } from './jobs/types.ts';
import type { Mail } from './mail/types.ts';
import { mount } from './middleware/mount.ts';
import type { Handlers, MountSteps } from './middleware/mount.ts';
import type { FileStore } from './storage/types.ts';

/** Made once a process; a noun takes what it needs. */
export interface Deps {
  db: Knex;
  files: FileStore;
  jobs: Jobs;
  events: Events;
  /** Worker threads for what is computed within a request; jobs get theirs from their context. */
  engine: EnginePool;
  mail: Mail;
  config: Config;
  log: Logger;
}

export interface Feature {
  table: RouteTable;
  mount(router: Router, steps: MountSteps): void;
  jobs: JobDefinition[];
}

/** Checks handlers against their table, then forgets the literal types, so that all nouns fit one list. */
export function feature<T extends RouteTable>(noun: { table: T; handlers: Handlers<T>; jobs?: JobDefinition[] }): Feature {
  return {
    table: noun.table,
    mount: (router, steps) => mount(router, noun.table, noun.handlers, steps),
    jobs: noun.jobs ?? [],
  };
}
