/** What the frame does with requests that are too large, stalled, broken or foreign, and what it says of failures. */
import { createHmac } from 'node:crypto';
import { readdirSync } from 'node:fs';
import { request } from 'node:http';
import { connect } from 'node:net';
import type { Socket } from 'node:net';
import { setTimeout as sleep } from 'node:timers/promises';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { translateError } from '../../server/errors/problems.ts';
import { mediaTypeOf } from '../../server/storage/media-type.ts';
import { openKit } from './kit.ts';
import type { Agent, Kit } from './kit.ts';

const MIB = 1024 * 1024;
const UPLOAD = '/studios/:studioId/stamp-sets/from-picture';
let kit: Kit;
let maker: Agent;
beforeAll(async () => {
  kit = await openKit();
  maker = await kit.signIn('maker');
});
afterAll(() => kit.close());

const port = () => Number(new URL(kit.url).port);
/** A connection that has sent the head of an upload and the beginning of a file. */
function beginUpload(declaredBytes: number): Promise<Socket> {
  const head = [
    `POST /api${UPLOAD.replace(':studioId', kit.studioId)} HTTP/1.1`, `Host: 127.0.0.1:${port()}`, `Cookie: ${maker.cookie}`, `X-CSRF-Token: ${maker.csrfToken}`,
    'Content-Type: multipart/form-data; boundary=edge', `Content-Length: ${declaredBytes}`, '', '',
  ].join('\r\n');
  return new Promise((resolve, reject) => {
    const socket = connect(port(), '127.0.0.1', () => {
      socket.write(head);
      socket.write('--edge\r\nContent-Disposition: form-data; name="picture"; filename="a.png"\r\nContent-Type: image/png\r\n\r\nabc');
      resolve(socket);
    });
    socket.once('error', reject);
  });
}
const descriptors = () => readdirSync('/proc/self/fd').length;

describe('an upload', () => {
  it('over its limit is refused in words with 413, whether it says its length or not', async () => {
    const said = await maker.upload(UPLOAD, { field: 'picture', bytes: new Uint8Array(90 * MIB), name: 'huge.png' }, { name: 'Huge' });
    expect(said.status).toBe(413);
    expect(said.body).toMatchObject({ code: 'too-large', detail: expect.stringMatching(/at most \d+ MB/) });

    const unsaid = await new Promise<number>((resolve, reject) => {
      const sending = request({ port: port(), host: '127.0.0.1', method: 'POST', path: `/api${UPLOAD.replace(':studioId', kit.studioId)}`, headers: { Cookie: maker.cookie, 'X-CSRF-Token': maker.csrfToken, 'Content-Type': 'multipart/form-data; boundary=edge', 'Transfer-Encoding': 'chunked' } }, (answer) => {
        answer.resume();
        resolve(answer.statusCode!);
      });
      sending.on('error', reject);
      sending.write('--edge\r\nContent-Disposition: form-data; name="picture"; filename="a.png"\r\n\r\n');
      void (async () => {
        for (let i = 0; i < 90 && !sending.destroyed; i += 1) {
          if (!sending.write(Buffer.alloc(MIB))) await new Promise((go) => sending.once('drain', go));
        }
      })();
    });
    expect(unsaid).toBe(413);
  });

  it('broken off leaves no file and no open descriptor', async () => {
    const breakOff = async (count: number) => {
      for (let i = 0; i < count; i += 1) {
        const socket = await beginUpload(5 * MIB);
        socket.on('error', () => undefined);
        // Every other one before anybody has looked at it.
        await sleep(i % 2 ? 10 : 0);
        socket.destroy();
      }
      await sleep(300);
    };
    // The first ones open the pool's connections, which stay.
    await breakOff(10);
    const before = descriptors();
    await breakOff(process.env.LONG ? 50 : 15);
    await expect.poll(descriptors, { timeout: 5000 }).toBeLessThanOrEqual(before + 2);
    expect(await kit.db('files')).toHaveLength(0);
    await maker.get('/studios').expect(200);
  });

  it.runIf(process.env.LONG)('that stalls is closed after 30 s, in words', async () => {
    const socket = await beginUpload(5 * MIB);
    let heard = '';
    socket.on('data', (chunk) => (heard += chunk));
    const started = Date.now();
    await new Promise((resolve) => socket.once('close', resolve));
    expect(Date.now() - started).toBeLessThan(35_000);
    expect(heard).toMatch(/^HTTP\/1\.1 408/);
    expect(heard).toContain('stopped arriving');
  }, 60_000);

  it('without a file, with two, or with a foreign field is refused', async () => {
    expect((await maker.post(UPLOAD, {})).status).toBeGreaterThanOrEqual(400);
    const foreign = await maker.upload(UPLOAD, { field: 'elsewhere', bytes: new Uint8Array(3), name: 'a.png' });
    expect(foreign.status).toBe(400);
    const empty = await maker.upload(UPLOAD, { field: 'picture', bytes: new Uint8Array(0), name: 'a.png' }, { name: 'Empty' });
    expect(empty.body).toMatchObject({ code: 'no-file', detail: 'The file is empty.' });
  });
});

describe('a file’s type', () => {
  it.each([
    ['image/png', [0x89, 0x50, 0x4e, 0x47, 0x0d, 0x0a, 0x1a, 0x0a, 0]],
    ['image/jpeg', [0xff, 0xd8, 0xff, 0xe0]],
    ['image/svg+xml', [...Buffer.from('\uFEFF<?xml version="1.0"?>\n<!-- drawn -->\n<svg xmlns="http://www.w3.org/2000/svg"/>')]],
    [null, [...Buffer.from('<html><svg></svg></html>')]],
    [null, []],
  ])('%s is told from its bytes', (type, bytes) => expect(mediaTypeOf(Uint8Array.from(bytes))).toBe(type));
});

describe('a request', () => {
  it('that is no JSON, too long, or to nowhere is answered as a problem in words', async () => {
    const broken = await maker.post('/studios').set('Content-Type', 'application/json').send('{"name": ');
    expect(broken.status).toBe(400);
    expect(broken.get('Content-Type')).toContain('application/problem+json');
    expect(broken.body.detail).toBe('What was sent is no valid JSON.');
    const long = await maker.post('/studios', { name: 'x'.repeat(3 * MIB) });
    expect(long.status).toBe(413);
    const nowhere = await maker.get('/no/such/place').expect(404);
    expect(nowhere.body).toMatchObject({ code: 'not-found', status: 404, title: 'Not Found' });
    const fields = await maker.post('/studios', { name: ' ' }).expect(400);
    expect(fields.body).toMatchObject({ code: 'invalid', errors: [{ path: 'name', message: 'Give it a name.' }] });
    await maker.post('/studios', { name: 'nul \u0000 byte' }).expect(400);
  });

  it('carries the headers that keep pages from being framed, sniffed or fed with foreign scripts', async () => {
    const answer = await kit.anonymous.get('/health/live').expect(200);
    const policy = answer.get('Content-Security-Policy')!;
    for (const rule of ["default-src 'self'", "script-src 'self'", "object-src 'none'", "base-uri 'none'", "frame-ancestors 'none'", "style-src 'self' 'unsafe-inline'"]) expect(policy).toContain(rule);
    expect(policy).not.toContain("script-src 'self' 'unsafe");
    expect(answer.get('X-Content-Type-Options')).toBe('nosniff');
    expect(answer.get('Referrer-Policy')).toBe('same-origin');
    expect(answer.get('X-Powered-By')).toBeUndefined();
  });

  it('with a cookie that was tampered with, or is signed with another secret, is nobody’s', async () => {
    const [name, value] = maker.cookie.split('=');
    const sid = decodeURIComponent(value).slice(2).split('.')[0];
    const forged = createHmac('sha256', 'another secret').update(sid).digest('base64').replace(/=+$/, '');
    await kit.anonymous.get('/studios').set('Cookie', `${name}=${encodeURIComponent(`s:${sid}.${forged}`)}`).expect(401);
    await kit.anonymous.get('/studios').set('Cookie', `${name}=${value.slice(0, -3)}abc`).expect(401);
  });
});

describe('behind https', () => {
  it('the cookie is Secure, bound to the host, and links lead to the public address', async () => {
    const secure = await openKit({ env: { PUBLIC_URL: 'https://cards.example', TRUST_PROXY: '1' } });
    try {
      const person = await secure.makePerson();
      const answer = await secure.anonymous.post('/session', { email: person.email, password: 'seven quiet herons 42' }).set('X-Forwarded-Proto', 'https').set('Origin', 'https://cards.example').expect(200);
      expect(answer.get('Set-Cookie')![0]).toMatch(/^__Host-inkmuster=.*; Path=\/;.*Secure/);
      expect(answer.get('Strict-Transport-Security')).toContain('max-age=31536000');
    } finally {
      await secure.close();
    }
  });
});

describe('a failure', () => {
  it('of the database or the disk has words of its own; one of the program has none that tell of its inside', () => {
    const coded = (code: string, message = 'inside') => translateError(Object.assign(new Error(message), { code }));
    expect(coded('ECONNREFUSED')).toMatchObject({ status: 503, code: 'database-away' });
    expect(coded('57P01')).toMatchObject({ status: 503, code: 'database-away' });
    expect(translateError(new Error('Connection terminated unexpectedly'))).toMatchObject({ status: 503 });
    expect(translateError(new Error('Query read timeout'))).toMatchObject({ status: 503 });
    expect(coded('ENOSPC')).toMatchObject({ status: 507, code: 'disk-full' });
    expect(coded('53100')).toMatchObject({ status: 507 });
    expect(coded('23505')).toMatchObject({ status: 409 });
    expect(translateError(new TypeError('x is undefined'))).toBeNull();
  });
});

describe('sessions and restarts', () => {
  it('outlive the server: another process on the same database knows the person', async () => {
    const second = await openKit({ databaseUrl: kit.databaseUrl });
    try {
      const answer = await fetch(`${second.url}/api/session`, { headers: { Cookie: maker.cookie } });
      expect(((await answer.json()) as { person: { id: string } }).person.id).toBe(maker.person.id);
    } finally {
      await second.close();
    }
  });

  it('stay ended, whatever was under way at sign-out', async () => {
    const person = await kit.makePerson();
    for (let round = 0; round < 5; round += 1) {
      const agent = await kit.signInAs(person);
      const underWay = Array.from({ length: 8 }, () => agent.get('/studios'));
      const out = agent.delete('/session');
      await Promise.all([...underWay, out]);
      await agent.get('/studios').expect(401);
    }
  });
});
