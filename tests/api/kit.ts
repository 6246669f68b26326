/**
 * What API tests stand on: a fresh database copied from the template, the whole application on a port of its own, people in
 * roles, and agents that carry cookie and form token by themselves.
 */
import { createHash, randomBytes } from 'node:crypto';
import { mkdtemp, rm } from 'node:fs/promises';
import { createServer } from 'node:http';
import type { Server } from 'node:http';
import type { AddressInfo } from 'node:net';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import bcrypt from 'bcryptjs';
import type { Knex } from 'knex';
import pg from 'pg';
import supertest from 'supertest';
import type { Test } from 'supertest';
import { createApp } from '../../server/app.ts';
import { assemble, createLog } from '../../server/assemble.ts';
import type { Application } from '../../server/assemble.ts';
import { readConfig } from '../../server/config.ts';
import type { Role } from '../../server/contract/shared.ts';
import { newId } from '../../server/db/database.ts';
import { insertMembership, insertStudio } from '../../server/features/account/membership.queries.ts';
import type { Deps } from '../../server/feature.ts';

export const PASSWORD = 'seven quiet herons 42';
/** Cheap, for tests only: the digest is the server's, the cost is not. */
const PASSWORD_HASH = bcrypt.hashSync(createHash('sha384').update(PASSWORD).digest('base64'), 4);

export interface Person { id: string; name: string; email: string }

export interface Agent {
  person: Person;
  studioId: string;
  /** Path below `/api`; `:studioId` stands for the agent's studio. */
  get(path: string): Test;
  post(path: string, body?: object): Test;
  put(path: string, body?: object): Test;
  patch(path: string, body?: object): Test;
  delete(path: string): Test;
  upload(path: string, file: { field?: string; bytes: Uint8Array; name: string }, fields?: Record<string, string>): Test;
  /** The raw cookie header, and the form token. */
  cookie: string;
  csrfToken: string;
}

export interface Kit {
  application: Application;
  deps: Deps;
  db: Knex;
  url: string;
  databaseUrl: string;
  /** The studio that `signIn` uses; made beforehand. */
  studioId: string;
  anonymous: Omit<Agent, 'person' | 'studioId' | 'cookie' | 'csrfToken'>;
  makePerson(name?: string): Promise<Person>;
  makeStudio(owner: Person, name?: string): Promise<string>;
  /** A person of the role, in the given studio or the kit's; a new person each time. */
  signIn(role: Role, studioId?: string): Promise<Agent>;
  signInAs(person: Person, studioId?: string): Promise<Agent>;
  /** Ends when the job is done, failed or cancelled; needs `jobs: true`. */
  jobEnded(agent: Agent, jobId: string, timeoutMs?: number): Promise<{ state: string; result: unknown; error: { code: string; message: string } | null }>;
  close(): Promise<void>;
}

export interface KitOptions {
  /** Take jobs too. */
  jobs?: boolean;
  env?: Record<string, string>;
  /** Another kit's database, to run two servers on one. */
  databaseUrl?: string;
}

export async function openKit(options: KitOptions = {}): Promise<Kit> {
  const databaseUrl = options.databaseUrl ?? (await copyTemplate());
  const files = await mkdtemp(join(tmpdir(), 'inkmuster-test-'));
  const config = readConfig({ DATABASE_URL: databaseUrl, SESSION_SECRET: 'only for tests, only for tests, only', STORAGE_FOLDER: files, LOG_LEVEL: process.env.TEST_LOG ?? 'silent', JOB_THREADS: '1', DB_POOL_MAX: process.env.TEST_POOL_MAX ?? '5', ...options.env });
  const application = await assemble(config, createLog(config));
  if (options.jobs) await application.work();
  const server = createServer(createApp(application));
  await new Promise<void>((resolve) => server.listen(0, '127.0.0.1', resolve));
  const url = `http://127.0.0.1:${(server.address() as AddressInfo).port}`;
  const { db } = application.deps;

  async function makePerson(name = `Person ${randomBytes(3).toString('hex')}`): Promise<Person> {
    const person = { id: newId(), name, email: `${randomBytes(6).toString('hex')}@studio.example` };
    await db('users').insert({ ...person, password_hash: PASSWORD_HASH });
    return person;
  }
  const makeStudio = (owner: Person, name = 'Test studio') => db.transaction((tx) => insertStudio(tx, name, owner.id));
  const studioId = options.databaseUrl ? '' : await makeStudio(await makePerson('First owner'));

  async function signInAs(person: Person, studio = studioId): Promise<Agent> {
    const answer = await supertest(url).post('/api/session').send({ email: person.email, password: PASSWORD }).expect(200);
    const cookie = (answer.get('Set-Cookie') ?? [])[0].split(';')[0];
    return { ...agentOn(url, { cookie, csrfToken: answer.body.csrfToken, studioId: studio }), person, studioId: studio, cookie, csrfToken: answer.body.csrfToken };
  }

  return {
    application,
    deps: application.deps,
    db,
    url,
    databaseUrl,
    studioId,
    anonymous: agentOn(url, { studioId }),
    makePerson,
    makeStudio,
    signInAs,
    async signIn(role, studio = studioId) {
      const person = await makePerson();
      await insertMembership(db, studio, person.id, role);
      return signInAs(person, studio);
    },
    async jobEnded(agent, jobId, timeoutMs = 20_000) {
      for (const end = Date.now() + timeoutMs; Date.now() < end; await new Promise((resolve) => setTimeout(resolve, 60))) {
        const { body } = await agent.get(`/studios/:studioId/jobs/${jobId}`).expect(200);
        if (!['queued', 'running'].includes(body.state)) return body;
      }
      throw new Error(`Job ${jobId} has not ended in ${timeoutMs} ms.`);
    },
    async close() {
      await closeServer(server);
      await application.stop();
      await rm(files, { recursive: true, force: true });
    },
  };
}

function agentOn(url: string, as: { cookie?: string; csrfToken?: string; studioId: string }) {
  const call = (method: 'get' | 'post' | 'put' | 'patch' | 'delete', path: string): Test => {
    const request = supertest(url)[method](`/api${path.replace(':studioId', as.studioId)}`);
    if (as.cookie) request.set('Cookie', as.cookie);
    if (as.csrfToken && method !== 'get') request.set('X-CSRF-Token', as.csrfToken);
    return request;
  };
  return {
    get: (path: string) => call('get', path),
    post: (path: string, body: object = {}) => call('post', path).send(body),
    put: (path: string, body: object = {}) => call('put', path).send(body),
    patch: (path: string, body: object = {}) => call('patch', path).send(body),
    delete: (path: string) => call('delete', path),
    upload: (path: string, file: { field?: string; bytes: Uint8Array; name: string }, fields: Record<string, string> = {}) =>
      Object.entries(fields).reduce((request, [name, value]) => request.field(name, value), call('post', path)).attach(file.field ?? 'file', Buffer.from(file.bytes), file.name),
  };
}

async function copyTemplate(): Promise<string> {
  const url = process.env.TEST_DATABASE_URL!;
  const name = `test_${randomBytes(6).toString('hex')}`;
  const admin = new pg.Client({ connectionString: url });
  await admin.connect();
  try {
    // A template cannot be copied by two at once; whoever is later waits.
    await admin.query('SELECT pg_advisory_lock(7103923)');
    await admin.query(`CREATE DATABASE ${name} TEMPLATE ${process.env.TEST_TEMPLATE!}`);
  } finally {
    await admin.end();
  }
  return Object.assign(new URL(url), { pathname: `/${name}` }).href;
}

async function closeServer(server: Server): Promise<void> {
  const closed = new Promise((resolve) => server.close(resolve));
  server.closeAllConnections();
  await closed;
}
