/** What owners do with their studio and its people. */
import type { Knex } from 'knex';
import type { Role } from '../../contract/shared.ts';
import type { AuditEntry, Invitation, Member, Studio, StudioSettings } from '../../contract/studio.ts';
import { conflict, invalid, notFound, stale } from '../../errors/app-error.ts';
import type { Deps } from '../../feature.ts';
import { listAudit, recordAudit } from '../account/audit.queries.ts';
import { hashToken, newToken } from '../account/invitation-token.ts';
import { findOpenInvitation, insertStudio } from '../account/membership.queries.ts';
import {
  binStudio, deleteMembership, findMember, findSettings, findStudio, insertInvitation, listBinned, listInvitations, listMembers, lockOwners, renameStudio, revokeInvitation, unbinStudio, updateRole, updateSettings,
} from './studio.queries.ts';

const INVITATION_DAYS = 7;
const LAST_OWNER = 'A studio needs an owner. Make somebody else an owner first.';

/** Who does it and from where, for the audit log. */
export interface Actor { personId: string; address: string }

export function createStudioService({ db, events, config }: Pick<Deps, 'db' | 'events' | 'config'>) {
  async function required(id: string, role: Role): Promise<Studio> {
    const studio = await findStudio(db, id, role);
    if (!studio) throw notFound('This studio');
    return studio;
  }
  const tell = (tx: Knex, studioId: string, noun: string) => events.publish(tx, studioId, { type: 'changed', noun, id: studioId });

  async function requiredMember(tx: Knex, studioId: string, personId: string): Promise<Member> {
    const member = await findMember(tx, studioId, personId);
    if (!member) throw notFound('This person');
    return member;
  }

  return {
    find: required,
    create: (name: string, actor: Actor): Promise<Studio> =>
      db.transaction(async (tx) => {
        const id = await insertStudio(tx, name, actor.personId);
        await recordAudit(tx, { studioId: id, ...actor, action: 'studio.made' });
        return (await findStudio(tx, id, 'owner'))!;
      }),

    async rename(id: string, version: number, name: string): Promise<Studio> {
      if (!(await renameStudio(db, id, version, name))) throw stale('The studio', await required(id, 'owner'));
      await tell(db, id, 'studio');
      return required(id, 'owner');
    },

    async remove(id: string, confirm: string, actor: Actor): Promise<void> {
      const studio = await required(id, 'owner');
      if (confirm !== studio.name) throw invalid('Type the name of the studio to delete it.', [{ path: 'confirm', message: `Type ${studio.name}` }]);
      await db.transaction(async (tx) => {
        await binStudio(tx, id);
        await recordAudit(tx, { studioId: id, ...actor, action: 'studio.deleted', about: studio.name });
      });
    },

    deletedOf: (personId: string): Promise<{ id: string; name: string; deletedAt: string }[]> => listBinned(db, personId),
    restore: (id: string, actor: Actor): Promise<Studio> =>
      db.transaction(async (tx) => {
        await unbinStudio(tx, id);
        await recordAudit(tx, { studioId: id, ...actor, action: 'studio.restored' });
        return (await findStudio(tx, id, 'owner'))!;
      }),

    settings: (studioId: string): Promise<StudioSettings> => findSettings(db, studioId),
    async changeSettings(studioId: string, { version, ...change }: Partial<StudioSettings> & { version: number }): Promise<StudioSettings> {
      const now = await findSettings(db, studioId);
      const next = { ...now, ...change };
      if (next.goodMm < next.snugMm) throw invalid('Good must not be less than snug.', [{ path: 'goodMm', message: 'Good must not be less than snug.' }]);
      if (!(await updateSettings(db, studioId, version, change))) throw stale('The settings', await findSettings(db, studioId));
      await tell(db, studioId, 'settings');
      return findSettings(db, studioId);
    },

    /** Addresses are for owners, who invite and remove. */
    async members(studioId: string, role: Role): Promise<Member[]> {
      const members = await listMembers(db, studioId);
      return role === 'owner' ? members : members.map((member) => ({ ...member, email: null }));
    },

    changeRole: (studioId: string, personId: string, role: Role, actor: Actor): Promise<Member> =>
      db.transaction(async (tx) => {
        const owners = await lockOwners(tx, studioId);
        const member = await requiredMember(tx, studioId, personId);
        if (role !== 'owner' && owners.length === 1 && owners[0] === personId) throw conflict('last-owner', LAST_OWNER);
        await updateRole(tx, studioId, personId, role);
        await recordAudit(tx, { studioId, ...actor, action: 'role.changed', about: member.name, details: { from: member.role, to: role } });
        await tell(tx, studioId, 'members');
        return { ...member, role };
      }),

    removeMember: (studioId: string, personId: string, actor: Actor): Promise<void> =>
      db.transaction(async (tx) => {
        const owners = await lockOwners(tx, studioId);
        const member = await requiredMember(tx, studioId, personId);
        if (owners.length === 1 && owners[0] === personId) throw conflict('last-owner', LAST_OWNER);
        await deleteMembership(tx, studioId, personId);
        await recordAudit(tx, { studioId, ...actor, action: personId === actor.personId ? 'member.left' : 'member.removed', about: member.name });
        await tell(tx, studioId, 'members');
      }),

    invitations: (studioId: string): Promise<Invitation[]> => listInvitations(db, studioId),
    async invite(studioId: string, role: Role, note: string, actor: Actor): Promise<{ invitation: Invitation; link: string }> {
      const token = newToken();
      const id = await db.transaction(async (tx) => {
        const made = await insertInvitation(tx, { studioId, tokenHash: hashToken(token), role, note, invitedBy: actor.personId, days: INVITATION_DAYS });
        await recordAudit(tx, { studioId, ...actor, action: 'invitation.made', about: note || null, details: { role } });
        return made;
      });
      const invitation = (await listInvitations(db, studioId)).find((i) => i.id === id)!;
      return { invitation, link: `${config.publicUrl ?? ''}/invitations/${token}` };
    },
    async withdraw(studioId: string, id: string, actor: Actor): Promise<void> {
      if (!(await revokeInvitation(db, studioId, id))) throw notFound('This invitation');
      await recordAudit(db, { studioId, ...actor, action: 'invitation.withdrawn' });
    },
    async showInvitation(token: string): Promise<{ studioName: string; role: Role; expiresAt: string }> {
      const invitation = await findOpenInvitation(db, hashToken(token));
      if (!invitation) throw notFound('This invitation');
      return { studioName: invitation.studioName, role: invitation.role, expiresAt: invitation.expiresAt };
    },

    async audit(studioId: string, before: number | undefined, limit: number): Promise<{ items: AuditEntry[]; next: number | null }> {
      const items = await listAudit(db, studioId, before, limit);
      return { items, next: items.length === limit ? items[items.length - 1].id : null };
    },
  };
}
