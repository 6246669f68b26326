import { mkdtempSync, readdirSync, readFileSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { readConfig } from '../../server/config.ts';
import { createMailer } from '../../server/mail/mailer.ts';

interface Mailbox { url: string; stop(): Promise<void> }
let folder: string;
let mailbox: Mailbox;
beforeAll(async () => {
  folder = mkdtempSync(join(tmpdir(), 'inkmuster-mail-'));
  const { startMailbox } = (await import(new URL('../../server/local/mailbox.mjs', import.meta.url).href)) as { startMailbox(folder: string): Promise<Mailbox> };
  mailbox = await startMailbox(folder);
});
afterAll(async () => {
  await mailbox.stop();
  rmSync(folder, { recursive: true, force: true });
});

const config = (more: Record<string, string> = {}) => readConfig({ DATABASE_URL: 'postgres://nobody@127.0.0.1/none', SESSION_SECRET: 'only for tests, only for tests, only', ...more });
const letters = () => readdirSync(folder).map((name) => JSON.parse(readFileSync(join(folder, name), 'utf8')) as { to: string; subject: string; text: string });

describe('a letter', () => {
  it('reaches the local mailbox, with its words as they were', async () => {
    await createMailer(config({ SMTP_URL: mailbox.url })).send({ to: 'fern@studio.example', subject: 'Come and stamp – Tuesday', text: 'The link:\nhttps://cards.example/invitations/abc\n' });
    expect(letters()).toEqual([{ at: expect.any(String), to: 'fern@studio.example', subject: 'Come and stamp – Tuesday', text: 'The link:\nhttps://cards.example/invitations/abc\n' }]);
  });

  it('takes no header or further address through a name or a subject', async () => {
    const send = createMailer(config({ SMTP_URL: mailbox.url })).send({ to: 'fern@studio.example\r\nBcc: all@studio.example', subject: 'Hello\r\nBcc: all@studio.example', text: 'x' });
    await send.catch(() => undefined);
    expect(letters().filter((l) => /all@/.test(l.to))).toEqual([]);
    expect(letters().every((l) => !/^all@/.test(l.to))).toBe(true);
  });

  it('is refused in words where there is no mail server', async () => {
    await expect(createMailer(config()).send({ to: 'fern@studio.example', subject: 'x', text: 'x' })).rejects.toMatchObject({ code: 'no-mail', status: 503 });
  });
});

describe('settings', () => {
  it('that cannot be used are told one by one, by name', () => {
    expect(() => readConfig({ DATABASE_URL: 'mysql://x', SESSION_SECRET: 'short', PORT: '99999' })).toThrow(/DATABASE_URL: .*\n\s+SESSION_SECRET: .*32.*\n\s+PORT: /);
    expect(() => config({ STORAGE: 's3' })).toThrow(/S3_BUCKET/);
  });
});
