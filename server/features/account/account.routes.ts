import type { Request } from 'express';
import { accountRoutes } from '../../contract/account.ts';
import type { PersonDetails, SessionInfo } from '../../contract/account.ts';
import { notSignedIn } from '../../errors/app-error.ts';
import { feature } from '../../feature.ts';
import type { Deps, Feature } from '../../feature.ts';
import { csrfToken } from '../../middleware/csrf.ts';
import { endSession, startSession } from '../../middleware/session.ts';
import { createAccountService } from './account.service.ts';

export function createAccount(deps: Deps): Feature {
  const account = createAccountService(deps);

  async function info(req: Request, person: PersonDetails): Promise<SessionInfo> {
    return { person, studios: await account.studiosOf(person.id), csrfToken: csrfToken(deps.config, req.sessionID) };
  }
  async function enter(req: Request, person: PersonDetails): Promise<SessionInfo> {
    await startSession(req, person.id);
    return info(req, person);
  }
  const addressOf = (req: Request) => req.ip ?? 'unknown';

  return feature({
    table: accountRoutes,
    handlers: {
      'GET /session': async ({ req }) => {
        const person = req.session.personId ? await account.find(req.session.personId) : null;
        return person ? info(req, person) : { person: null, studios: [], csrfToken: null };
      },
      'POST /session': async ({ body, req }) => enter(req, await account.signIn(body.email, body.password, addressOf(req))),
      'DELETE /session': async ({ req, person }) => {
        await endSession(req);
        await account.signedOut(person.id, addressOf(req));
      },
      'POST /account': async ({ body, req }) => enter(req, await account.register(body, addressOf(req))),
      'PATCH /account': ({ body, person }) => account.change(person.id, body),
      'PUT /account/password': async ({ body, person, req }) => enter(req, await account.changePassword(person.id, body.currentPassword, body.newPassword, addressOf(req))),
      'GET /account/sessions': async ({ person, req }) => ({ items: await account.sessions(person.id, currentOf(req)) }),
      'DELETE /account/sessions': ({ person, req }) => account.endOtherSessions(person.id, currentOf(req), addressOf(req)),
      'DELETE /account/sessions/:id': ({ params, person, req }) => account.endSession(person.id, params.id, addressOf(req)),
    },
  });
}

function currentOf(req: Request): string {
  if (!req.session.publicId) throw notSignedIn();
  return req.session.publicId;
}
