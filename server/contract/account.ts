/** Who is signed in, and what a person may change about her account. */
import { z } from 'zod';
import { routes } from './route.ts';
import { Id, Instant, Name, Role } from './shared.ts';

export const Unit = z.enum(['mm', 'in']);
export type Unit = z.infer<typeof Unit>;

export const Email = z.string().trim().toLowerCase().max(254, 'At most 254 characters.').pipe(z.email('This is no e-mail address.'));
/** Fifteen characters, since the password stands alone; the upper limit only keeps the hashing bounded. */
export const NewPassword = z.string().min(15, 'At least 15 characters. Several words in a row are easy to keep in mind.').max(512, 'At most 512 characters.');
/** As typed at sign-in: never judged, only compared. */
const TypedPassword = z.string().min(1, 'Type your password.').max(512);

export const PersonDetails = z.object({ id: Id, name: z.string(), email: z.string(), unit: Unit });
export type PersonDetails = z.infer<typeof PersonDetails>;

export const Membership = z.object({ id: Id, name: z.string(), role: Role });
export type Membership = z.infer<typeof Membership>;

/** `person` is null where nobody is signed in. The token goes back in the `X-CSRF-Token` header of every change. */
export const SessionInfo = z.object({ person: PersonDetails.nullable(), studios: z.array(Membership), csrfToken: z.string().nullable() });
export type SessionInfo = z.infer<typeof SessionInfo>;

export const OpenSession = z.object({ id: Id, device: z.string(), startedAt: Instant, lastSeenAt: Instant, current: z.boolean() });
export type OpenSession = z.infer<typeof OpenSession>;

export const accountRoutes = routes({
  'GET /session': { summary: 'Who is signed in, and the token for changes', access: 'anyone', response: SessionInfo },
  'POST /session': { summary: 'Sign in', access: 'anyone', body: z.object({ email: z.string().trim().toLowerCase().min(1, 'Type your e-mail address.').max(254), password: TypedPassword }), response: SessionInfo },
  'DELETE /session': { summary: 'Sign out', access: 'signed-in' },
  'POST /account': {
    summary: 'Register: makes the account and, unless invited, a studio of which the person is owner',
    access: 'anyone',
    status: 201,
    body: z.object({ name: Name, email: Email, password: NewPassword, studioName: Name.optional(), unit: Unit.default('mm'), invitation: z.string().max(100).optional() }),
    response: SessionInfo,
  },
  'PATCH /account': { summary: 'Change name or unit', access: 'signed-in', body: z.object({ name: Name.optional(), unit: Unit.optional() }), response: PersonDetails },
  'PUT /account/password': {
    summary: 'Change the password; every other session ends',
    access: 'signed-in',
    body: z.object({ currentPassword: TypedPassword, newPassword: NewPassword }),
    response: SessionInfo,
  },
  'GET /account/sessions': { summary: 'Where this account is signed in', access: 'signed-in', response: z.object({ items: z.array(OpenSession) }) },
  'DELETE /account/sessions': { summary: 'End every session but this one', access: 'signed-in' },
  'DELETE /account/sessions/:id': { summary: 'End one session', access: 'signed-in', params: z.object({ id: Id }) },
});
