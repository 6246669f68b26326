/** Files in a folder and in a bucket, and the tidying of what nobody points to. */
import { createServer } from 'node:http';
import type { AddressInfo } from 'node:net';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { tidy } from '../../server/jobs/maintenance.ts';
import { createS3Store } from '../../server/storage/s3-store.ts';
import { openKit } from './kit.ts';
import type { Kit } from './kit.ts';

let kit: Kit;
beforeAll(async () => {
  kit = await openKit();
});
afterAll(() => kit.close());
const bytes = Uint8Array.from({ length: 5000 }, (_, i) => i % 251);

describe('the file store', () => {
  it('gives back what was put, under a key that nobody can guess, until it is removed', async () => {
    const { files } = kit.deps;
    const key = await files.put(bytes, 'image/png');
    expect(key).toMatch(/^[0-9a-f]{32}$/);
    expect(Buffer.from(await files.get(key)).equals(Buffer.from(bytes))).toBe(true);
    await files.remove(key);
    await expect(files.get(key)).rejects.toMatchObject({ status: 404, code: 'file-missing' });
  });

  it.each(['../../etc/passwd', '', 'a'.repeat(31), '/etc/passwd', `${'0'.repeat(30)}/.`])('takes %j for no file at all', async (key) => {
    await expect(kit.deps.files.get(key)).rejects.toMatchObject({ code: 'file-missing' });
  });

  it('loses what nothing points to for a day, and keeps the rest', async () => {
    const { files, db } = kit.deps;
    await db.schema.createTable('pointing', (t) => void t.text('picture_file_key'));
    const [pointed, stray, young] = [await files.put(bytes, 'image/png'), await files.put(bytes, 'image/png'), await files.put(bytes, 'image/png')];
    await db('pointing').insert({ picture_file_key: pointed });
    await db('files').whereIn('key', [pointed, stray]).update({ created_at: db.raw(`now() - interval '25 hours'`) });
    await tidy(kit.deps);
    await files.get(pointed);
    await files.get(young);
    await expect(files.get(stray)).rejects.toMatchObject({ code: 'file-missing' });
  });

  it('in a bucket does the same', async () => {
    const kept = new Map<string, Buffer>();
    const bucket = createServer((req, res) => {
      const parts: Buffer[] = [];
      req.on('data', (part: Buffer) => parts.push(part));
      req.on('end', () => {
        const key = req.url!.split('?')[0];
        if (req.method === 'PUT') kept.set(key, Buffer.concat(parts));
        if (req.method === 'DELETE') kept.delete(key);
        if (req.method !== 'GET') return res.writeHead(req.method === 'DELETE' ? 204 : 200).end();
        const found = kept.get(key);
        if (found) res.writeHead(200, { 'Content-Length': found.length }).end(found);
        else res.writeHead(404, { 'Content-Type': 'application/xml' }).end('<?xml version="1.0"?><Error><Code>NoSuchKey</Code><Message>none</Message></Error>');
      });
    });
    await new Promise<void>((resolve) => bucket.listen(0, '127.0.0.1', resolve));
    Object.assign(process.env, { AWS_ACCESS_KEY_ID: 'test', AWS_SECRET_ACCESS_KEY: 'test' });
    const store = createS3Store({ bucket: 'cards', region: 'us-east-1', endpoint: `http://127.0.0.1:${(bucket.address() as AddressInfo).port}` });
    await store.write('k1', bytes, 'image/png');
    expect([...kept.keys()]).toEqual(['/cards/k1']);
    expect(Buffer.from((await store.read('k1'))!).equals(Buffer.from(bytes))).toBe(true);
    await store.erase('k1');
    expect(await store.read('k1')).toBeNull();
    bucket.closeAllConnections();
    bucket.close();
  });
});

describe('bins', () => {
  it('are emptied after 30 days, and not before', async () => {
    const person = await kit.makePerson();
    const [old, recent] = [await kit.makeStudio(person, 'Old'), await kit.makeStudio(person, 'Recent')];
    await kit.db('studios').where({ id: old }).update({ deleted_at: kit.db.raw(`now() - interval '31 days'`) });
    await kit.db('studios').where({ id: recent }).update({ deleted_at: kit.db.raw(`now() - interval '29 days'`) });
    await tidy(kit.deps);
    expect((await kit.db('studios').whereIn('id', [old, recent]).select('id')).map((r) => r.id)).toEqual([recent]);
  });
});
