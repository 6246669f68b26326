/** A studio: its people, invitations, settings and audit log. */
import { z } from 'zod';
import { Membership, Unit } from './account.ts';
import { routes } from './route.ts';
import { Id, Instant, LengthMm, LengthOrZeroMm, Name, Role, StudioItemParams, StudioParams, Version } from './shared.ts';

const Minutes = z.number().min(0, 'Must not be negative.').max(600, 'At most 600 minutes.');

/** What is planned and judged with unless said otherwise. Lengths mm, times minutes. */
export const StudioSettings = z.object({
  version: Version,
  unit: Unit,
  /** Least border of a fit called good, and of one called snug. */
  goodMm: LengthMm,
  snugMm: LengthOrZeroMm,
  pace: z.object({ setup: Minutes, perStamp: Minutes, press: Minutes, perInked: Minutes, cutPass: Minutes }),
  /** Between labels; to the sheet's edge; more between labels of different turns; photopolymer beyond the ink. */
  gapMm: LengthOrZeroMm,
  marginMm: LengthOrZeroMm,
  turnToleranceMm: LengthOrZeroMm,
  trimMm: LengthOrZeroMm,
});
export type StudioSettings = z.infer<typeof StudioSettings>;

export const Studio = z.object({ id: Id, name: z.string(), role: Role, version: Version, createdAt: Instant });
export type Studio = z.infer<typeof Studio>;

/** Helpers see who works beside them, but no addresses. */
export const Member = z.object({ personId: Id, name: z.string(), email: z.string().nullable(), role: Role, joinedAt: Instant });
export type Member = z.infer<typeof Member>;

export const Invitation = z.object({ id: Id, role: Role, note: z.string(), invitedBy: z.string(), createdAt: Instant, expiresAt: Instant });
export type Invitation = z.infer<typeof Invitation>;

export const AuditEntry = z.object({ id: z.int(), at: Instant, person: z.string().nullable(), action: z.string(), about: z.string().nullable(), details: z.record(z.string(), z.unknown()) });
export type AuditEntry = z.infer<typeof AuditEntry>;

const MemberParams = z.object({ studioId: Id, personId: Id });
const Token = z.string().regex(/^[\w-]{20,64}$/);

export const studioRoutes = routes({
  'GET /studios': { summary: 'Studios the person belongs to', access: 'signed-in', response: z.object({ items: z.array(Membership) }) },
  'GET /deleted-studios': { summary: 'Studios that the person, as their owner, can still bring back', access: 'signed-in', response: z.object({ items: z.array(z.object({ id: Id, name: z.string(), deletedAt: Instant })) }) },
  'POST /studios': { summary: 'Make a studio and become its owner', access: 'signed-in', status: 201, body: z.object({ name: Name }), response: Studio },
  'GET /studios/:studioId': { summary: 'One studio', access: 'helper', params: StudioParams, response: Studio },
  'PATCH /studios/:studioId': { summary: 'Rename a studio', access: 'owner', params: StudioParams, body: z.object({ version: Version, name: Name }), response: Studio },
  'DELETE /studios/:studioId': { summary: 'Delete a studio; it can be brought back for 30 days', access: 'owner', params: StudioParams, query: z.object({ confirm: Name }) },
  'POST /studios/:studioId/restore': { summary: 'Bring a deleted studio back', access: 'owner', deletedStudio: true, params: StudioParams, response: Studio },

  'GET /studios/:studioId/settings': { summary: 'Settings of a studio', access: 'helper', params: StudioParams, response: StudioSettings },
  'PATCH /studios/:studioId/settings': {
    summary: 'Change settings', access: 'owner', params: StudioParams,
    body: StudioSettings.partial().extend({ version: Version }).refine((s) => s.goodMm === undefined || s.snugMm === undefined || s.goodMm >= s.snugMm, { path: ['goodMm'], message: 'Good must not be less than snug.' }),
    response: StudioSettings,
  },

  'GET /studios/:studioId/members': { summary: 'People of a studio', access: 'helper', params: StudioParams, response: z.object({ items: z.array(Member) }) },
  'PATCH /studios/:studioId/members/:personId': { summary: 'Change a role', access: 'owner', params: MemberParams, body: z.object({ role: Role }), response: Member },
  'DELETE /studios/:studioId/members/:personId': { summary: 'Remove a person from a studio', access: 'owner', params: MemberParams },
  'DELETE /studios/:studioId/membership': { summary: 'Leave a studio', access: 'helper', params: StudioParams },

  'GET /studios/:studioId/invitations': { summary: 'Open invitations', access: 'owner', params: StudioParams, response: z.object({ items: z.array(Invitation) }) },
  'POST /studios/:studioId/invitations': {
    summary: 'Invite by a link, good for 7 days and one person; the link is shown once', access: 'owner', params: StudioParams, status: 201,
    body: z.object({ role: Role.default('helper'), note: z.string().trim().max(120).default('') }),
    response: z.object({ invitation: Invitation, link: z.string() }),
  },
  'DELETE /studios/:studioId/invitations/:id': { summary: 'Withdraw an invitation', access: 'owner', params: StudioItemParams },
  'GET /invitations/:token': { summary: 'What an invitation link leads to', access: 'anyone', params: z.object({ token: Token }), response: z.object({ studioName: z.string(), role: Role, expiresAt: Instant }) },
  'POST /invitations/:token/accept': { summary: 'Join by an invitation link', access: 'signed-in', params: z.object({ token: Token }), response: Membership },

  'GET /studios/:studioId/audit': {
    summary: 'Audit log, newest first', access: 'owner', params: StudioParams,
    query: z.object({ before: z.coerce.number().int().positive().optional(), limit: z.coerce.number().int().min(1).max(200).default(50) }),
    response: z.object({ items: z.array(AuditEntry), next: z.int().nullable() }),
  },
});
