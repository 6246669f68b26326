/**
 * The Nth statement fails, N = 1, 2, 3 … until everything goes well, as SQLite's own tests do it (https://www.sqlite.org/testing.html,
 * "I/O error testing"): each time nothing acknowledged is lost, nothing refused is left behind, and no job is stuck.
 */
import { afterEach, beforeAll, afterAll, describe, expect, it } from 'vitest';
import { z } from 'zod';
import type { Queue } from '../../server/jobs/queue.ts';
import type { JobDefinition } from '../../server/jobs/types.ts';
import { drawSheet } from '../api/stamp-sheet.ts';
import { openKit } from '../api/kit.ts';
import type { Agent, Kit } from '../api/kit.ts';

const { png } = drawSheet([{ words: 'hello', x: 5, y: 15, sizeMm: 8 }], { widthMm: 40, heightMm: 20, dpi: 150 });
let kit: Kit;
let maker: Agent;
/** Statements until one fails; -1: none does. */
let countdown = -1;

beforeAll(async () => {
  kit = await openKit();
  maker = await kit.signIn('maker');
  // Every client of Knex, those of transactions too, runs its statements through this method of their class.
  const prototype = Object.getPrototypeOf(kit.db.client) as { _query(connection: unknown, statement: unknown): Promise<unknown> };
  const run = prototype._query;
  prototype._query = function (connection, statement) {
    if (countdown > 0 && (countdown -= 1) === 0) return Promise.reject(Object.assign(new Error('read ECONNRESET'), { code: 'ECONNRESET' }));
    return run.call(this, connection, statement);
  };
});
afterAll(() => kit.close());
afterEach(() => {
  countdown = -1;
});

/** Calls until no statement is left to fail; answers how many could. */
async function failEach(act: () => Promise<{ status: number; body: { code?: string; detail?: string } }>, check: () => Promise<void>): Promise<number> {
  for (let n = 1; n < 200; n += 1) {
    countdown = n;
    const answer = await act();
    const reached = countdown === 0;
    countdown = -1;
    if (answer.status >= 400) expect(answer.body, `statement ${n}`).toMatchObject({ code: 'database-away', detail: expect.stringContaining('try again') });
    await check();
    if (!reached) return n - 1;
  }
  throw new Error('There is no end of statements.');
}

describe('when the Nth statement fails', () => {
  it('an upload is there whole, with its job, or not at all', async () => {
    const acknowledged: string[] = [];
    const failures = await failEach(
      async () => {
        const answer = await maker.upload('/studios/:studioId/stamp-sets/from-picture', { field: 'picture', bytes: png, name: 'sheet.png' }, { name: 'Greetings' });
        if (answer.status < 400) acknowledged.push(answer.body.id);
        return answer;
      },
      async () => {
        const sets = (await kit.db('stamp_sets').select('id')).map((r) => r.id);
        expect(acknowledged.filter((id) => !sets.includes(id))).toEqual([]);
        // A set that was made though its maker was told of a failure is whole as well.
        expect(await kit.db('readings').count('* as n')).toEqual([{ n: sets.length }]);
        expect(await kit.db('jobs').count('* as n')).toEqual([{ n: sets.length }]);
        const unknown = await kit.db('readings as r').leftJoin('files as f', 'f.key', 'r.file_key').whereNull('f.key').count('* as n');
        expect(unknown).toEqual([{ n: 0 }]);
      },
    );
    expect(failures).toBeGreaterThan(4);
  });

  it('registering makes account and studio, or neither', async () => {
    let i = 0;
    await kit.db('rate_limits').delete();
    const failures = await failEach(
      () => {
        i += 1;
        return kit.anonymous.post('/account', { name: `New ${i}`, email: `new${i}@studio.example`, password: 'seven quiet herons 42' });
      },
      async () => {
        const homeless = await kit.db('users as u').leftJoin('memberships as m', 'm.person_id', 'u.id').whereLike('u.email', 'new%').whereNull('m.studio_id').count('* as n');
        expect(homeless).toEqual([{ n: 0 }]);
        const bare = await kit.db('studios as s').leftJoin('studio_settings as t', 't.studio_id', 's.id').whereNull('t.studio_id').count('* as n');
        expect(bare).toEqual([{ n: 0 }]);
        await kit.db('rate_limits').delete();
      },
    );
    expect(failures).toBeGreaterThan(4);
  });

  it('a disk that is full is told as such, and leaves no set without its picture', async () => {
    const put = kit.deps.files.put;
    const before = await kit.db('stamp_sets').count('* as n');
    kit.deps.files.put = () => Promise.reject(Object.assign(new Error('ENOSPC: no space left on device, write'), { code: 'ENOSPC' }));
    const answer = await maker.upload('/studios/:studioId/stamp-sets/from-picture', { field: 'picture', bytes: png, name: 'sheet.png' }, { name: 'Greetings' });
    kit.deps.files.put = put;
    expect(answer.status).toBe(507);
    expect(answer.body).toMatchObject({ code: 'disk-full', detail: expect.stringContaining('no room') });
    expect(await kit.db('stamp_sets').count('* as n')).toEqual(before);
    await maker.get('/studios').expect(200);
  });

  it('a job is done in the end, and saved once', async () => {
    const written: string[] = [];
    const definition: JobDefinition<{ n: number }, string> = {
      kind: 'counted',
      payload: z.object({ n: z.number() }),
      timeLimitMs: 5_000,
      async run({ n }) {
        // From here on: the first time, the Nth statement of the job's end fails.
        if (!written.includes(`tried ${n}`)) countdown = n;
        written.push(`tried ${n}`);
        return 'output';
      },
      async save(tx, { n }) {
        await tx('audit_events').insert({ studio_id: kit.studioId, action: 'job.saved', about: String(n) });
        return n;
      },
    };
    (kit.deps.jobs as Queue).define([definition as JobDefinition]);
    await kit.db('jobs').delete();
    await kit.application.work();
    for (let n = 1; n <= 8; n += 1) {
      const id = await kit.deps.jobs.enqueue(kit.db, { kind: 'counted' }, { n }, { studioId: kit.studioId, subjectId: null, personId: maker.person.id });
      for (const end = Date.now() + 20_000; ; await new Promise((go) => setTimeout(go, 100))) {
        const row = await kit.db('jobs').where({ id }).first('state').catch(() => null);
        if (row?.state === 'done') break;
        expect(Date.now(), `job ${n} is ${row?.state}`).toBeLessThan(end);
      }
      countdown = -1;
      expect(await kit.db('audit_events').where({ action: 'job.saved', about: String(n) })).toHaveLength(1);
    }
  });
});
