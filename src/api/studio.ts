import type { AuditEntry, Invitation, Member, Studio, StudioSettings } from '../../server/contract/studio.ts';
import type { Role } from '../../server/contract/shared.ts';
import { call } from './http.ts';
import type { Answer, Body } from './http.ts';

export type DeletedStudio = Answer<'GET /deleted-studios'>['items'][number];
export type { AuditEntry, Invitation, Member, Role, Studio, StudioSettings };

export const makeStudio = (name: string) => call('POST /studios', { body: { name } });
export const readStudio = (studioId: string) => call('GET /studios/:studioId', { params: { studioId } });
export const renameStudio = (studioId: string, version: number, name: string) => call('PATCH /studios/:studioId', { params: { studioId }, body: { version, name } });
export const deleteStudio = (studioId: string, confirm: string) => call('DELETE /studios/:studioId', { params: { studioId }, query: { confirm } });

export const restoreStudio = (studioId: string) => call('POST /studios/:studioId/restore', { params: { studioId } });
export const listDeletedStudios = async (): Promise<DeletedStudio[]> => (await call('GET /deleted-studios')).items;

export const readSettings = (studioId: string) => call('GET /studios/:studioId/settings', { params: { studioId } });
export const changeSettings = (studioId: string, change: Body<'PATCH /studios/:studioId/settings'>) => call('PATCH /studios/:studioId/settings', { params: { studioId }, body: change });

export const listMembers = async (studioId: string): Promise<Member[]> => (await call('GET /studios/:studioId/members', { params: { studioId } })).items;
export const changeRole = (studioId: string, personId: string, role: Role) => call('PATCH /studios/:studioId/members/:personId', { params: { studioId, personId }, body: { role } });
export const removeMember = (studioId: string, personId: string) => call('DELETE /studios/:studioId/members/:personId', { params: { studioId, personId } });
export const leaveStudio = (studioId: string) => call('DELETE /studios/:studioId/membership', { params: { studioId } });

export const listInvitations = async (studioId: string): Promise<Invitation[]> => (await call('GET /studios/:studioId/invitations', { params: { studioId } })).items;
export const invite = (studioId: string, role: Role, note: string) => call('POST /studios/:studioId/invitations', { params: { studioId }, body: { role, note } });
export const withdrawInvitation = (studioId: string, id: string) => call('DELETE /studios/:studioId/invitations/:id', { params: { studioId, id } });
export const readInvitation = (token: string) => call('GET /invitations/:token', { params: { token } });
export const acceptInvitation = (token: string) => call('POST /invitations/:token/accept', { params: { token } });

export const readAudit = (studioId: string, before?: number) => call('GET /studios/:studioId/audit', { params: { studioId }, query: { before } });
