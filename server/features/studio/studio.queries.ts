/** SQL of studios, their people, invitations and settings. */
import type { Knex } from 'knex';
import type { Role } from '../../contract/shared.ts';
import type { Invitation, Member, Studio, StudioSettings } from '../../contract/studio.ts';
import { newId } from '../../db/database.ts';

export async function findStudio(db: Knex, id: string, role: Role): Promise<Studio | null> {
  const row = await db('studios').where({ id }).whereNull('deleted_at').first('id', 'name', 'version', 'created_at');
  return row ? { id: row.id, name: row.name, role, version: row.version, createdAt: row.created_at.toISOString() } : null;
}

/** False where the version is not the current one. */
export async function renameStudio(db: Knex, id: string, version: number, name: string): Promise<boolean> {
  return (await db('studios').where({ id, version }).whereNull('deleted_at').update({ name, version: version + 1, updated_at: db.fn.now() })) === 1;
}

export async function binStudio(db: Knex, id: string): Promise<void> {
  await db('studios').where({ id }).update({ deleted_at: db.fn.now() });
}

export async function listBinned(db: Knex, ownerId: string): Promise<{ id: string; name: string; deletedAt: string }[]> {
  const rows = await db('studios as s').join('memberships as m', 'm.studio_id', 's.id').where({ 'm.person_id': ownerId, 'm.role': 'owner' }).whereNotNull('s.deleted_at').orderBy('s.deleted_at', 'desc').select('s.id', 's.name', 's.deleted_at');
  return rows.map((r) => ({ id: r.id, name: r.name, deletedAt: r.deleted_at.toISOString() }));
}

export async function unbinStudio(db: Knex, id: string): Promise<void> {
  await db('studios').where({ id }).update({ deleted_at: null });
}

const SETTINGS_COLUMNS = {
  unit: 'unit', goodMm: 'good_mm', snugMm: 'snug_mm', gapMm: 'gap_mm', marginMm: 'margin_mm', turnToleranceMm: 'turn_tolerance_mm', trimMm: 'trim_mm',
} as const;
const PACE_COLUMNS = { setup: 'pace_setup', perStamp: 'pace_per_stamp', press: 'pace_press', perInked: 'pace_per_inked', cutPass: 'pace_cut_pass' } as const;
type SettingsField = keyof typeof SETTINGS_COLUMNS;
type PaceField = keyof typeof PACE_COLUMNS;

export async function findSettings(db: Knex, studioId: string): Promise<StudioSettings> {
  const row = await db('studio_settings').where({ studio_id: studioId }).first('version', ...Object.values(SETTINGS_COLUMNS), ...Object.values(PACE_COLUMNS));
  const read = <F extends string>(columns: Record<F, string>) => Object.fromEntries(Object.entries(columns).map(([field, column]) => [field, row[column as string]]));
  return { version: row.version, ...read(SETTINGS_COLUMNS), pace: read(PACE_COLUMNS) } as StudioSettings;
}

export async function updateSettings(db: Knex, studioId: string, version: number, change: Partial<Omit<StudioSettings, 'version'>>): Promise<boolean> {
  const { pace = {}, ...rest } = change;
  const columns: Record<string, unknown> = { version: version + 1, updated_at: db.fn.now() };
  for (const [field, value] of Object.entries(rest)) columns[SETTINGS_COLUMNS[field as SettingsField]] = value;
  for (const [field, value] of Object.entries(pace)) columns[PACE_COLUMNS[field as PaceField]] = value;
  return (await db('studio_settings').where({ studio_id: studioId, version }).update(columns)) === 1;
}

const members = (db: Knex, studioId: string) =>
  db('memberships as m').join('users as u', 'u.id', 'm.person_id').where('m.studio_id', studioId).select('u.id', 'u.name', 'u.email', 'm.role', 'm.created_at');

const toMember = (r: Record<string, never>): Member => ({ personId: r.id, name: r.name, email: r.email, role: r.role, joinedAt: (r.created_at as Date).toISOString() });

export async function listMembers(db: Knex, studioId: string): Promise<Member[]> {
  return (await members(db, studioId).orderBy(['u.name', 'u.id'])).map(toMember);
}

export async function findMember(db: Knex, studioId: string, personId: string): Promise<Member | null> {
  const [row] = await members(db, studioId).where('m.person_id', personId);
  return row ? toMember(row) : null;
}

/** Locks the studio's memberships to the end of the transaction, so that two owners cannot both step back at once. */
export async function lockOwners(tx: Knex.Transaction, studioId: string): Promise<string[]> {
  const rows = await tx('memberships').where({ studio_id: studioId }).orderBy('person_id').forUpdate().select('person_id', 'role');
  return rows.filter((r) => r.role === 'owner').map((r) => r.person_id);
}

export async function updateRole(db: Knex, studioId: string, personId: string, role: Role): Promise<void> {
  await db('memberships').where({ studio_id: studioId, person_id: personId }).update({ role });
}

export async function deleteMembership(db: Knex, studioId: string, personId: string): Promise<void> {
  await db('memberships').where({ studio_id: studioId, person_id: personId }).delete();
}

export async function listInvitations(db: Knex, studioId: string): Promise<Invitation[]> {
  const rows = await db('invitations as i')
    .join('users as u', 'u.id', 'i.invited_by')
    .where('i.studio_id', studioId)
    .whereNull('i.revoked_at')
    .whereNull('i.accepted_at')
    .where('i.expires_at', '>', db.fn.now())
    .orderBy('i.id', 'desc')
    .select('i.id', 'i.role', 'i.note', 'u.name', 'i.created_at', 'i.expires_at');
  return rows.map((r) => ({ id: r.id, role: r.role, note: r.note, invitedBy: r.name, createdAt: r.created_at.toISOString(), expiresAt: r.expires_at.toISOString() }));
}

export async function insertInvitation(db: Knex, invitation: { studioId: string; tokenHash: Buffer; role: Role; note: string; invitedBy: string; days: number }): Promise<string> {
  const id = newId();
  await db('invitations').insert({
    id, studio_id: invitation.studioId, token_hash: invitation.tokenHash, role: invitation.role, note: invitation.note,
    invited_by: invitation.invitedBy, expires_at: db.raw('now() + make_interval(days => ?)', [invitation.days]),
  });
  return id;
}

export async function revokeInvitation(db: Knex, studioId: string, id: string): Promise<boolean> {
  return (await db('invitations').where({ studio_id: studioId, id }).whereNull('revoked_at').whereNull('accepted_at').update({ revoked_at: db.fn.now() })) === 1;
}
