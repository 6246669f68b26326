/** Which passwords may be chosen, and how they are kept. */
import { createHash } from 'node:crypto';
import { readFileSync } from 'node:fs';
import { AppError } from '../../errors/app-error.ts';
import type { EnginePool } from '../../jobs/types.ts';

/** About 350 ms on one core of 2020: slow for whoever tries a stolen list, bearable once a sign-in. */
const COST = 12;
/** Hash of a random text nobody has kept: compared with where there is no such account, so that both take equally long. */
const NOBODY = '$2b$12$qq1DMk4g2vWAxReL3kj8yu1nZ5N/WrGyN6qLqAPfhnW6/BlrPO46a';

/** Passwords of 15 characters and more that guessing programs try: words doubled or numbered, keyboard walks, well-known phrases. */
const common = new Set(readFileSync(new URL('./common-passwords.txt', import.meta.url), 'utf8').split('\n').filter(Boolean));

/** bcrypt ignores what comes after byte 72; a digest of the whole password fits, and leaves no zero byte that would cut it short. */
const digestOf = (password: string) => createHash('sha384').update(password.normalize('NFC')).digest('base64');

export function hashPassword(engine: EnginePool, password: string): Promise<string> {
  return engine.run('bcryptHash', { digest: digestOf(password), cost: COST });
}

export function passwordMatches(engine: EnginePool, password: string, hash: string | null): Promise<boolean> {
  return engine.run('bcryptCompare', { digest: digestOf(password), hash: hash ?? NOBODY });
}

/** No rules of composition: only what is easily guessed is refused, and the person is told why. */
export function refuseGuessable(password: string, field: string, person: { name: string; email: string }): void {
  const reason = guessable(password.normalize('NFC').toLowerCase(), person);
  if (reason) throw new AppError(400, 'guessable-password', reason, { errors: [{ path: field, message: reason }] });
}

function guessable(password: string, person: { name: string; email: string }): string | null {
  if (common.has(password)) return 'This password is on the list of those that are guessed first. Choose another.';
  if (period(password) <= password.length / 2) return 'This password only repeats a few characters. Choose another.';
  const own = [person.email, person.email.split('@')[0], person.name, person.name.replace(/\s/g, ''), 'inkmuster'].map((text) => text.toLowerCase()).filter((text) => text.length >= 4);
  const rest = own.reduce((text, part) => text.replaceAll(part, ''), password).replace(/[\d\W_]/g, '');
  if (rest.length < 4 && own.some((part) => password.includes(part))) return 'This password is little more than a name that others know. Choose another.';
  return null;
}

/** Length of the shortest beginning that, repeated, gives the whole text (the last time perhaps cut short). */
function period(text: string): number {
  for (let n = 1; n < text.length; n += 1) if (text.slice(n) === text.slice(0, -n)) return n;
  return text.length;
}
