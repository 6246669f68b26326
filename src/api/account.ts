import type { OpenSession, PersonDetails, SessionInfo, Unit } from '../../server/contract/account.ts';
import { call, setCsrfToken } from './http.ts';
import type { Body } from './http.ts';

export type { OpenSession, PersonDetails, SessionInfo, Unit };

/** The token for changes comes with every answer about the session. */
async function keepToken(answer: Promise<SessionInfo>): Promise<SessionInfo> {
  const session = await answer;
  setCsrfToken(session.csrfToken);
  return session;
}

export const readSession = () => keepToken(call('GET /session'));
export const signIn = (email: string, password: string) => keepToken(call('POST /session', { body: { email, password } }));
export const register = (account: Body<'POST /account'>) => keepToken(call('POST /account', { body: account }));
export async function signOut(): Promise<void> {
  await call('DELETE /session');
  setCsrfToken(null);
}
export const changeAccount = (change: Body<'PATCH /account'>) => call('PATCH /account', { body: change });
export const changePassword = (currentPassword: string, newPassword: string) => keepToken(call('PUT /account/password', { body: { currentPassword, newPassword } }));
export const listSessions = async (): Promise<OpenSession[]> => (await call('GET /account/sessions')).items;
export const endSession = (id: string) => call('DELETE /account/sessions/:id', { params: { id } });
export const endOtherSessions = () => call('DELETE /account/sessions');
