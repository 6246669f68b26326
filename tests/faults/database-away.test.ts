/** PostgreSQL stopped, killed and frozen while people are at work: errors in words, then recovery without anybody's help. */
import { readFileSync } from 'node:fs';
import { join } from 'node:path';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { endAll, installation, newClient, ownCluster, until } from './processes.ts';
import type { Client, Cluster, Process } from './processes.ts';

let cluster: Cluster;
let server: Process;
let person: Client;
beforeAll(async () => {
  cluster = await ownCluster();
  server = await (await installation(cluster)).server();
  person = await newClient(server.port);
});
afterAll(async () => {
  endAll();
  await cluster.stop();
});

/** People who go on trying, and what they were told. */
function traffic(): { end(): Promise<Map<number, string>>; } {
  const told = new Map<number, string>();
  let going = true;
  const lanes = Array.from({ length: 4 }, async (_, lane) => {
    while (going) {
      const { status, body } = await (lane % 2 ? person.call('POST', '/studios', { name: `Lane ${lane}` }) : person.call('GET', '/studios'));
      told.set(status, String(body.detail ?? ''));
      await new Promise((go) => setTimeout(go, 20));
    }
  });
  return {
    async end() {
      going = false;
      await Promise.all(lanes);
      return told;
    },
  };
}

const recovered = () => until('the server recovers', async () => (await person.call('GET', '/studios')).status === 200 && (await person.call('GET', '/health/ready')).status === 200, 15_000);

describe('a database that is away', () => {
  it.each(['fast', 'immediate'])('(stopped %s, then started) is told in words, and the server goes on by itself', async (mode) => {
    const people = traffic();
    await new Promise((go) => setTimeout(go, 300));
    await cluster.stop(mode);
    const down = await until('a refusal', async () => {
      const answer = await person.call('GET', '/studios');
      return answer.status === 503 && answer;
    }, 10_000);
    expect(down.body).toMatchObject({ code: expect.stringMatching(/-away$/), detail: expect.stringContaining('try again in a moment') });
    expect((await person.call('GET', '/health/live')).status).toBe(200);
    expect((await person.call('GET', '/health/ready')).status).toBe(503);
    await cluster.start();
    await recovered();
    const told = await people.end();
    expect([...told.keys()].filter((status) => ![200, 201, 503].includes(status)), JSON.stringify([...told])).toEqual([]);
    expect(server.child.exitCode).toBeNull();
    // Events and the queue are back too: a job asked for now is done.
    await until('news are listened for again', async () => (await person.call('GET', '/studios/:studioId/jobs')).status === 200, 5_000);
  });

  it('that is frozen is told within 5 s, and work goes on when it thaws', async () => {
    const postmaster = Number(readFileSync(join(cluster.folder, 'data', 'postmaster.pid'), 'utf8').split('\n')[0]);
    const family = [postmaster, ...childrenOf(postmaster)];
    family.forEach((pid) => process.kill(pid, 'SIGSTOP'));
    try {
      const asked = Date.now();
      const { status, body } = await person.call('GET', '/studios');
      expect(Date.now() - asked).toBeLessThan(5_500);
      expect(status).toBe(503);
      expect(body.detail).toMatch(/try again in a moment/i);
    } finally {
      family.forEach((pid) => process.kill(pid, 'SIGCONT'));
    }
    await recovered();
  });
});

function childrenOf(pid: number): number[] {
  return readFileSync(`/proc/${pid}/task/${pid}/children`, 'utf8').trim().split(' ').filter(Boolean).map(Number);
}
