import { mkdtemp, mkdir, rm, writeFile } from 'node:fs/promises';
import { get } from 'node:http';
import type { IncomingMessage } from 'node:http';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { openKit } from './kit.ts';
import type { Kit } from './kit.ts';

let kit: Kit;
let folder: string;
beforeAll(async () => {
  folder = await mkdtemp(join(tmpdir(), 'inkmuster-client-'));
  await mkdir(join(folder, 'assets'));
  await writeFile(join(folder, 'index.html'), '<!doctype html><title>Inkmuster</title>');
  await writeFile(join(folder, 'assets', 'page-abc123.js'), `export const words = ${JSON.stringify('press '.repeat(2000))};`);
  kit = await openKit({ env: { CLIENT_FOLDER: folder } });
});
afterAll(async () => {
  await kit.close();
  await rm(folder, { recursive: true });
});

/** The answer as it goes over the wire; fetch would undo the compression. */
const answer = (path: string) => new Promise<IncomingMessage>((resolve, reject) => {
  get(`${kit.url}${path}`, { headers: { 'Accept-Encoding': 'gzip' } }, (response) => resolve(response.resume())).on('error', reject);
});

describe('the pages', () => {
  it('come compressed, and what carries its content\'s hash in its name is kept by browsers for good', async () => {
    const { headers } = await answer('/assets/page-abc123.js');
    expect(headers['content-encoding']).toBe('gzip');
    expect(headers['cache-control']).toContain('immutable');
  });

  it('are the same file at every address of the application, asked for anew each time', async () => {
    const { headers, statusCode } = await answer('/s/anything/gear/inks');
    expect([statusCode, headers['cache-control'], headers['content-type']]).toEqual([200, 'no-cache', 'text/html; charset=utf-8']);
  });

  it('never answer for a script that is gone, which a page from before an update may still ask for', async () => {
    expect((await answer('/assets/page-old.js')).statusCode).toBe(404);
  });

  it('leave answers of the API uncompressed, since they hold the form token', async () => {
    expect((await answer('/api/openapi.json')).headers['content-encoding']).toBeUndefined();
  });
});
