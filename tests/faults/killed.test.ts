/** Processes killed with -9 in the middle of their work. */
import pg from 'pg';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { drawSheet } from '../api/stamp-sheet.ts';
import { endAll, installation, newClient, ownCluster, until } from './processes.ts';
import type { Client, Cluster, Process } from './processes.ts';

const HELD_MS = 3_000;
const { png: sheet } = drawSheet([{ words: 'thank you', x: 8, y: 20, sizeMm: 9 }, { words: 'hello', x: 8, y: 45, sizeMm: 9 }], { widthMm: 70, heightMm: 60, dpi: 300 });
let cluster: Cluster;
beforeAll(async () => {
  cluster = await ownCluster();
});
afterAll(async () => {
  endAll();
  await cluster.stop();
});

async function uploadSheet(person: Client): Promise<string> {
  const form = new FormData();
  form.set('name', 'Tide table greetings');
  form.set('picture', new Blob([new Uint8Array(sheet)], { type: 'image/png' }), 'sheet.png');
  const { status, body } = await person.call('POST', '/studios/:studioId/stamp-sets/from-picture', form);
  expect(status, JSON.stringify(body)).toBe(202);
  return body.id as string;
}

const jobOf = async (person: Client) => ((await person.call('GET', '/studios/:studioId/jobs')).body.items as { id: string; state: string; kind: string }[])[0];
const running = (person: Client) => until('the job runs', async () => {
  const job = await jobOf(person);
  return job?.state === 'running' && job;
}, 15_000);

/** Read once, whoever read it: one reading, and each sentiment one time. */
async function expectReadOnce(databaseUrl: string, person: Client, setId: string, jobId: string): Promise<void> {
  const { body } = await person.call('GET', `/studios/:studioId/stamp-sets/${setId}`);
  const pictures = body.pictures as { id: string }[];
  expect(pictures).toHaveLength(1);
  const places = (body.sentiments as { place: object }[]).map((s) => JSON.stringify(s.place));
  expect(places.length).toBeGreaterThan(0);
  expect(new Set(places).size).toBe(places.length);
  expect(await stateOf(databaseUrl, jobId)).toEqual([{ state: 'done', attempt: 2 }]);
}

async function stateOf(databaseUrl: string, jobId: string): Promise<{ state: string; attempt: number }[]> {
  const db = new pg.Client({ connectionString: databaseUrl });
  await db.connect();
  const { rows } = await db.query('SELECT state, attempt FROM jobs WHERE id = $1', [jobId]);
  await db.end();
  return rows;
}

describe('a worker killed in the middle of a reading', () => {
  it('is stood in for by another within 20 s, and the reading is written once', async () => {
    const site = await installation(cluster, { JOBS: 'off' });
    const server = await site.server();
    const first = await site.worker({ JOBS: 'on', JOB_DELAY_MS: String(HELD_MS) });
    const person = await newClient(server.port);
    const setId = await uploadSheet(person);
    const job = await running(person);
    const second = await site.worker({ JOBS: 'on' });
    await first.kill();
    const killedAt = Date.now();
    await until('the job is done', async () => (await person.call('GET', `/studios/:studioId/jobs/${job.id}`)).body.state === 'done', 20_000);
    expect(Date.now() - killedAt).toBeLessThan(20_000);
    await expectReadOnce(site.databaseUrl, person, setId, job.id);
    await Promise.all([server.kill('SIGTERM'), second.kill('SIGTERM')]);
  });
});

describe('a server killed in the middle of a reading', () => {
  it('does it again after its start, once, for a person who is still signed in', async () => {
    const site = await installation(cluster);
    const before = await site.server({ JOB_DELAY_MS: String(HELD_MS) });
    const person = await newClient(before.port);
    const setId = await uploadSheet(person);
    const job = await running(person);
    await before.kill();
    const after = await site.server();
    const back = person.on(after.port);
    expect((await back.call('GET', '/studios/:studioId')).status).toBe(200);
    await until('the job is done', async () => (await back.call('GET', `/studios/:studioId/jobs/${job.id}`)).body.state === 'done', 20_000);
    await expectReadOnce(site.databaseUrl, back, setId, job.id);
    await after.kill('SIGTERM');
  });
});

describe('a server asked to stop', () => {
  it('hands the job in its hands back without counting it as a try, and ends by itself', async () => {
    const site = await installation(cluster);
    const before = await site.server({ JOB_DELAY_MS: '60000' });
    const person = await newClient(before.port);
    await uploadSheet(person);
    const job = await running(person);
    const asked = Date.now();
    await before.kill('SIGTERM');
    expect(Date.now() - asked).toBeLessThan(9_000);
    expect(before.child.exitCode).toBe(0);
    expect(await stateOf(site.databaseUrl, job.id)).toEqual([{ state: 'queued', attempt: 0 }]);
  });
});

describe('kills at random moments under load', () => {
  it('lose nothing that was acknowledged', async () => {
    const rounds = process.env.LONG ? 100 : 3;
    const site = await installation(cluster);
    let server: Process = await site.server();
    let person = await newClient(server.port);
    const acknowledged = new Set<string>();
    let readyMs = 0;
    for (let round = 0; round < rounds; round += 1) {
      let going = true;
      const load = Array.from({ length: 4 }, async (_, lane) => {
        for (let i = 0; going; i += 1) {
          const answer = await person.call('POST', '/studios', { name: `Room ${round}-${lane}-${i}` }).catch(() => null);
          if (answer?.status === 201) acknowledged.add(answer.body.id as string);
          else if (!answer) break;
        }
      });
      // On a slow machine nothing would have been acknowledged yet.
      const before = acknowledged.size;
      await until('people are answered', async () => acknowledged.size >= before + 4, 20_000);
      await new Promise((go) => setTimeout(go, (round * 7919) % 900));
      await server.kill();
      going = false;
      await Promise.all(load);
      const begun = Date.now();
      server = await site.server();
      readyMs = Math.max(readyMs, Date.now() - begun);
      person = person.on(server.port);
      const { body } = await person.call('GET', '/studios');
      const there = new Set((body.items as { id: string }[]).map((s) => s.id));
      expect([...acknowledged].filter((id) => !there.has(id))).toEqual([]);
    }
    expect(acknowledged.size).toBeGreaterThanOrEqual(rounds * 4);
    expect(readyMs).toBeLessThan(10_000);
    await server.kill('SIGTERM');
  }, process.env.LONG ? 1_200_000 : 60_000);
});
