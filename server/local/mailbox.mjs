/** A mailbox for a machine without a mail server: takes letters by SMTP on loopback and keeps each as a file of JSON. */
import { randomBytes } from 'node:crypto';
import { mkdirSync, renameSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';

const MAX_BYTES = 1024 * 1024;

/** @returns {Promise<{ url: string, stop: () => Promise<void> }>} */
export async function startMailbox(folder) {
  const { SMTPServer } = await import('smtp-server');
  const { simpleParser } = await import('mailparser');
  mkdirSync(folder, { recursive: true, mode: 0o700 });
  const server = new SMTPServer({
    disabledCommands: ['AUTH', 'STARTTLS'],
    size: MAX_BYTES,
    onData(stream, _session, done) {
      simpleParser(stream).then((letter) => {
        const at = new Date().toISOString();
        const name = `${at.replace(/[^\d]/g, '')}-${randomBytes(4).toString('hex')}.json`;
        const kept = { at, to: letter.to?.text ?? '', subject: letter.subject ?? '', text: letter.text ?? '' };
        writeFileSync(join(folder, `.${name}`), JSON.stringify(kept, null, 2), { mode: 0o600 });
        renameSync(join(folder, `.${name}`), join(folder, name));
        done();
      }, done);
    },
  });
  server.on('error', () => undefined);
  await new Promise((resolve, reject) => {
    server.server.once('error', reject);
    server.listen(0, '127.0.0.1', resolve);
  });
  return { url: `smtp://127.0.0.1:${server.server.address().port}`, stop: () => new Promise((resolve) => server.close(resolve)) };
}
