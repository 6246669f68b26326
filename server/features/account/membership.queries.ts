/** SQL of who belongs where: studios made, joined by invitation, left. */
import type { Knex } from 'knex';
import type { Membership } from '../../contract/account.ts';
import type { Role } from '../../contract/shared.ts';
import { newId } from '../../db/database.ts';

export async function insertStudio(tx: Knex.Transaction, name: string, ownerId: string, unit: 'mm' | 'in' = 'mm'): Promise<string> {
  const id = newId();
  await tx('studios').insert({ id, name });
  await tx('studio_settings').insert({ studio_id: id, unit });
  await insertMembership(tx, id, ownerId, 'owner');
  return id;
}

export async function insertMembership(db: Knex, studioId: string, personId: string, role: Role): Promise<void> {
  await db('memberships').insert({ studio_id: studioId, person_id: personId, role });
}

export async function listMemberships(db: Knex, personId: string): Promise<Membership[]> {
  return db('memberships as m')
    .join('studios as s', 's.id', 'm.studio_id')
    .where('m.person_id', personId)
    .whereNull('s.deleted_at')
    .orderBy(['s.name', 's.id'])
    .select('s.id', 's.name', 'm.role');
}

export interface OpenInvitation { id: string; studioId: string; studioName: string; role: Role; expiresAt: string }

/** Neither expired, withdrawn nor used. With `lock`, nobody else can use it before the transaction ends. */
export async function findOpenInvitation(db: Knex, tokenHash: Buffer, lock = false): Promise<OpenInvitation | null> {
  const row = await db('invitations as i')
    .join('studios as s', 's.id', 'i.studio_id')
    .where('i.token_hash', tokenHash)
    .whereNull('i.revoked_at')
    .whereNull('i.accepted_at')
    .whereNull('s.deleted_at')
    .where('i.expires_at', '>', db.fn.now())
    .modify((q) => lock && q.forUpdate('i'))
    .first('i.id', 'i.studio_id', 's.name', 'i.role', 'i.expires_at');
  return row ? { id: row.id, studioId: row.studio_id, studioName: row.name, role: row.role, expiresAt: row.expires_at.toISOString() } : null;
}

export async function markAccepted(db: Knex, invitationId: string, personId: string): Promise<void> {
  await db('invitations').where({ id: invitationId }).update({ accepted_at: db.fn.now(), accepted_by: personId });
}

export async function findRole(db: Knex, studioId: string, personId: string): Promise<Role | null> {
  const row = await db('memberships').where({ studio_id: studioId, person_id: personId }).first('role');
  return row?.role ?? null;
}
