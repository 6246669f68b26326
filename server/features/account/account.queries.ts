/** SQL of people and their sessions. */
import type { Knex } from 'knex';
import type { OpenSession, PersonDetails, Unit } from '../../contract/account.ts';

const DETAILS = ['id', 'name', 'email', 'unit'];
/** How long an unused session lives; the store keeps only when it ends. */
const IDLE = '14 days';

export async function insertPerson(db: Knex, person: PersonDetails & { passwordHash: string }): Promise<void> {
  await db('users').insert({ id: person.id, name: person.name, email: person.email, unit: person.unit, password_hash: person.passwordHash });
}

export async function findPersonById(db: Knex, id: string): Promise<PersonDetails | null> {
  return (await db('users').where({ id }).first(DETAILS)) ?? null;
}

export async function findCredentials(db: Knex, by: { email: string } | { id: string }): Promise<{ person: PersonDetails; passwordHash: string } | null> {
  const row = await db('users').where(by).first([...DETAILS, 'password_hash']);
  if (!row) return null;
  const { password_hash: passwordHash, ...person } = row;
  return { person, passwordHash };
}

export async function updatePerson(db: Knex, id: string, change: { name?: string; unit?: Unit }): Promise<PersonDetails> {
  const [row] = await db('users').where({ id }).update({ ...change, updated_at: db.fn.now() }).returning(DETAILS);
  return row;
}

export async function updatePasswordHash(db: Knex, id: string, hash: string): Promise<void> {
  await db('users').where({ id }).update({ password_hash: hash, updated_at: db.fn.now() });
}

export async function listSessions(db: Knex, personId: string, currentPublicId: string): Promise<OpenSession[]> {
  const rows = await db('sessions')
    .where({ person_id: personId })
    .where('expire', '>', db.fn.now())
    .orderBy('expire', 'desc')
    .select('public_id', db.raw(`sess ->> 'device' AS device`), db.raw(`(sess ->> 'startedAt')::bigint AS started`), db.raw(`(expire - ?::interval)::timestamptz AS seen`, [IDLE]));
  return rows.map((r) => ({ id: r.public_id, device: r.device, startedAt: new Date(r.started).toISOString(), lastSeenAt: r.seen.toISOString(), current: r.public_id === currentPublicId }));
}

export async function deleteSession(db: Knex, personId: string, publicId: string): Promise<boolean> {
  return (await db('sessions').where({ person_id: personId, public_id: publicId }).delete()) > 0;
}

export async function deleteSessionsExcept(db: Knex, personId: string, publicId: string | null): Promise<void> {
  await db('sessions').where({ person_id: personId }).modify((q) => publicId !== null && q.whereNot({ public_id: publicId })).delete();
}
