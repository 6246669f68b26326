import { spawnSync } from 'node:child_process';
import { mkdtempSync, readdirSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import pg from 'pg';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { drawSheet } from '../api/stamp-sheet.ts';
import { openKit } from '../api/kit.ts';
import type { Kit } from '../api/kit.ts';
import { root } from './processes.ts';

let kit: Kit;
let scratch: string;
beforeAll(async () => {
  kit = await openKit();
  scratch = mkdtempSync(join(tmpdir(), 'inkmuster-backup-'));
});
afterAll(async () => {
  await kit.close();
  rmSync(scratch, { recursive: true, force: true });
});

const run = (command: string, args: string[], databaseUrl: string, files: string) =>
  spawnSync(process.execPath, ['server/local/backup.mjs', command, join(scratch, 'copy'), ...args], { cwd: root, encoding: 'utf8', env: { ...process.env, DATABASE_URL: databaseUrl, STORAGE_FOLDER: files } });

describe('a backup', () => {
  it('brings back rows and files as they were, and overwrites nothing unasked', async () => {
    const maker = await kit.signIn('maker');
    const { png } = drawSheet([{ words: 'hello', x: 5, y: 15, sizeMm: 8 }], { widthMm: 40, heightMm: 20, dpi: 150 });
    const { body: set } = await maker.upload('/studios/:studioId/stamp-sets/from-picture', { field: 'picture', bytes: png, name: 'sheet.png' }, { name: 'Kept' }).expect(202);
    const storage = kit.deps.config.storage;
    const folder = storage.kind === 'folder' ? storage.folder : '';
    expect(run('backup', [], kit.databaseUrl, folder)).toMatchObject({ status: 0 });
    expect(run('backup', [], kit.databaseUrl, folder).stderr).toContain('exists already');

    const url = Object.assign(new URL(kit.databaseUrl), { pathname: '/postgres' }).href;
    const admin = new pg.Client({ connectionString: url });
    await admin.connect();
    await admin.query('CREATE DATABASE restored');
    await admin.end();
    const restoredUrl = Object.assign(new URL(kit.databaseUrl), { pathname: '/restored' }).href;
    const restoredFiles = join(scratch, 'files');
    expect(run('restore', [], restoredUrl, restoredFiles)).toMatchObject({ status: 0, stderr: '' });
    expect(run('restore', [], restoredUrl, restoredFiles).stderr).toContain('--replace');
    expect(run('restore', ['--replace'], restoredUrl, restoredFiles)).toMatchObject({ status: 0 });

    const second = await openKit({ databaseUrl: restoredUrl, env: { STORAGE_FOLDER: restoredFiles } });
    const back = await second.signInAs(maker.person, kit.studioId);
    const { body } = await back.get(`/studios/:studioId/stamp-sets/${set.id}`).expect(200);
    expect(body.name).toBe('Kept');
    const { file_key: key } = await second.db('readings').first('file_key');
    expect(Buffer.from(await second.deps.files.get(key)).equals(png)).toBe(true);
    expect(readdirSync(restoredFiles).length).toBeGreaterThan(0);
    await second.close();
  });
});
