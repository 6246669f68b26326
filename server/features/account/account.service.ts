/** Registering, signing in, and what a person changes about herself. */
import type { Knex } from 'knex';
import type { Membership, OpenSession, PersonDetails, Unit } from '../../contract/account.ts';
import { newId } from '../../db/database.ts';
import { AppError, conflict, invalid, notFound } from '../../errors/app-error.ts';
import type { Deps } from '../../feature.ts';
import { consume, createLimiter } from '../../middleware/limits.ts';
import { deleteSession, deleteSessionsExcept, findCredentials, findPersonById, insertPerson, listSessions, updatePasswordHash, updatePerson } from './account.queries.ts';
import { recordAudit } from './audit.queries.ts';
import { hashToken } from './invitation-token.ts';
import { findOpenInvitation, findRole, insertMembership, insertStudio, listMemberships, markAccepted } from './membership.queries.ts';
import { hashPassword, passwordMatches, refuseGuessable } from './password.ts';

const MINUTES = 60;
const HOURS = 3600;
/** Failed sign-ins. NIST SP 800-63B-4 §3.2.2 allows at most 100 in a row for one account. */
const LIMITS = {
  accountHere: { points: 10, seconds: 15 * MINUTES },
  account: { points: 100, seconds: 24 * HOURS },
  address: { points: 100, seconds: 15 * MINUTES },
  // A whole class may register from behind one address.
  registrations: { points: 60, seconds: HOURS },
};
const WRONG = () => new AppError(401, 'wrong-credentials', 'E-mail address and password do not belong together.');
const TOO_OFTEN = 'Too many tries to sign in.';

export type AccountService = ReturnType<typeof createAccountService>;

export function createAccountService({ db, engine, events }: Pick<Deps, 'db' | 'engine' | 'events'>) {
  const byAccountHere = createLimiter(db, 'sign-in-here', LIMITS.accountHere.points, LIMITS.accountHere.seconds);
  const byAccount = createLimiter(db, 'sign-in', LIMITS.account.points, LIMITS.account.seconds);
  const byAddress = createLimiter(db, 'sign-in-from', LIMITS.address.points, LIMITS.address.seconds);
  const registrations = createLimiter(db, 'register', LIMITS.registrations.points, LIMITS.registrations.seconds);

  /**
   * A try is counted before it is judged, so that many at once gain nothing, and given back where it was right. Addresses
   * that have no account are counted and take as long as the others.
   */
  async function checkPassword(by: { email: string } | { id: string }, password: string, address: string): Promise<PersonDetails> {
    const key = 'email' in by ? by.email : by.id;
    await consume(byAddress, address, TOO_OFTEN);
    await consume(byAccountHere, `${key}|${address}`, TOO_OFTEN);
    await consume(byAccount, key, TOO_OFTEN);
    const found = await findCredentials(db, by);
    const right = await passwordMatches(engine, password, found?.passwordHash ?? null);
    if (!found || !right) {
      await recordAudit(db, { personId: found?.person.id ?? null, action: 'session.refused', address });
      throw WRONG();
    }
    await Promise.all([byAddress.reward(address), byAccountHere.delete(`${key}|${address}`), byAccount.delete(key)]);
    return found.person;
  }

  async function join(tx: Knex.Transaction, token: string, personId: string, address: string): Promise<Membership> {
    const invitation = await findOpenInvitation(tx, hashToken(token), true);
    if (!invitation) throw notFound('This invitation');
    if (await findRole(tx, invitation.studioId, personId)) throw conflict('already-member', `You belong to ${invitation.studioName} already.`);
    await insertMembership(tx, invitation.studioId, personId, invitation.role);
    await markAccepted(tx, invitation.id, personId);
    await recordAudit(tx, { studioId: invitation.studioId, personId, action: 'invitation.accepted', details: { role: invitation.role }, address });
    await events.publish(tx, invitation.studioId, { type: 'changed', noun: 'members', id: personId });
    return { id: invitation.studioId, name: invitation.studioName, role: invitation.role };
  }

  return {
    async register(form: { name: string; email: string; password: string; studioName?: string; unit: Unit; invitation?: string }, address: string): Promise<PersonDetails> {
      refuseGuessable(form.password, 'password', form);
      await consume(registrations, address, 'Many accounts were made from here.');
      const passwordHash = await hashPassword(engine, form.password);
      const person: PersonDetails = { id: newId(), name: form.name, email: form.email, unit: form.unit };
      return db.transaction(async (tx) => {
        if (await findCredentials(tx, { email: form.email })) {
          const words = 'There is an account with this e-mail address. Sign in instead.';
          throw new AppError(409, 'email-taken', words, { errors: [{ path: 'email', message: words }] });
        }
        await insertPerson(tx, { ...person, passwordHash });
        if (form.invitation) await join(tx, form.invitation, person.id, address);
        else await insertStudio(tx, form.studioName ?? `${form.name}’s studio`.slice(0, 120), person.id, form.unit);
        await recordAudit(tx, { personId: person.id, action: 'account.registered', address });
        return person;
      });
    },

    async signIn(email: string, password: string, address: string): Promise<PersonDetails> {
      const person = await checkPassword({ email }, password, address);
      await recordAudit(db, { personId: person.id, action: 'session.started', address });
      return person;
    },

    async signedOut(personId: string, address: string): Promise<void> {
      await recordAudit(db, { personId, action: 'session.ended', address });
    },

    /** Every session ends, the present one too: the caller starts a new one. */
    async changePassword(personId: string, current: string, next: string, address: string): Promise<PersonDetails> {
      const person = await checkPassword({ id: personId }, current, address).catch((error: unknown) => {
        if (error instanceof AppError && error.code === 'wrong-credentials') throw invalid('This is not your present password.', [{ path: 'currentPassword', message: 'This is not your present password.' }]);
        throw error;
      });
      refuseGuessable(next, 'newPassword', person);
      const hash = await hashPassword(engine, next);
      await db.transaction(async (tx) => {
        await updatePasswordHash(tx, personId, hash);
        await deleteSessionsExcept(tx, personId, null);
        await recordAudit(tx, { personId, action: 'password.changed', address });
      });
      return person;
    },

    find: (personId: string): Promise<PersonDetails | null> => findPersonById(db, personId),
    studiosOf: (personId: string): Promise<Membership[]> => listMemberships(db, personId),
    change: (personId: string, change: { name?: string; unit?: Unit }): Promise<PersonDetails> => updatePerson(db, personId, change),
    sessions: (personId: string, current: string): Promise<OpenSession[]> => listSessions(db, personId, current),

    async endOtherSessions(personId: string, current: string, address: string): Promise<void> {
      await deleteSessionsExcept(db, personId, current);
      await recordAudit(db, { personId, action: 'session.others-ended', address });
    },
    async endSession(personId: string, publicId: string, address: string): Promise<void> {
      if (!(await deleteSession(db, personId, publicId))) throw notFound('This session');
      await recordAudit(db, { personId, action: 'session.ended-from-list', address });
    },

    acceptInvitation: (token: string, personId: string, address: string): Promise<Membership> => db.transaction((tx) => join(tx, token, personId, address)),
  };
}
