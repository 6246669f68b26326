/** The audit log: sign-ins, changes of rights, deletions, shares. */
import type { Knex } from 'knex';
import type { AuditEntry } from '../../contract/studio.ts';

export interface AuditRecord {
  studioId?: string | null;
  personId: string | null;
  /** `noun.deed`: `session.started`, `role.changed`, `stamp-set.deleted`. */
  action: string;
  about?: string | null;
  details?: Record<string, unknown>;
  address?: string | null;
}

export async function recordAudit(db: Knex, { studioId = null, personId, action, about = null, details = {}, address = null }: AuditRecord): Promise<void> {
  await db('audit_events').insert({ studio_id: studioId, person_id: personId, action, about, details: JSON.stringify(details), address });
}

/** Newest first, of one studio; sign-ins belong to a person and are not shown here. */
export async function listAudit(db: Knex, studioId: string, before: number | undefined, limit: number): Promise<AuditEntry[]> {
  const rows: { id: number; created_at: Date; name: string | null; action: string; about: string | null; details: Record<string, unknown> }[] = await db('audit_events as a')
    .leftJoin('users as u', 'u.id', 'a.person_id')
    .where('a.studio_id', studioId)
    .modify((q) => before !== undefined && q.where('a.id', '<', before))
    .orderBy('a.id', 'desc')
    .limit(limit)
    .select('a.id', 'a.created_at', 'u.name', 'a.action', 'a.about', 'a.details');
  return rows.map((r) => ({ id: r.id, at: r.created_at.toISOString(), person: r.name, action: r.action, about: r.about, details: r.details }));
}
