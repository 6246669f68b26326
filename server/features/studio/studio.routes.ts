import type { Request } from 'express';
import { studioRoutes } from '../../contract/studio.ts';
import { feature } from '../../feature.ts';
import type { Deps, Feature } from '../../feature.ts';
import { createAccountService } from '../account/account.service.ts';
import { createStudioService } from './studio.service.ts';
import type { Actor } from './studio.service.ts';

export function createStudio(deps: Deps): Feature {
  const account = createAccountService(deps);
  const studio = createStudioService(deps);
  const actor = ({ person, req }: { person: { id: string }; req: Request }): Actor => ({ personId: person.id, address: req.ip ?? 'unknown' });

  return feature({
    table: studioRoutes,
    handlers: {
      'GET /studios': async ({ person }) => ({ items: await account.studiosOf(person.id) }),
      'POST /studios': (call) => studio.create(call.body.name, actor(call)),
      'GET /studios/:studioId': ({ params, role }) => studio.find(params.studioId, role),
      'PATCH /studios/:studioId': ({ params, body }) => studio.rename(params.studioId, body.version, body.name),
      'DELETE /studios/:studioId': (call) => studio.remove(call.params.studioId, call.query.confirm, actor(call)),
      'GET /deleted-studios': async ({ person }) => ({ items: await studio.deletedOf(person.id) }),
      'POST /studios/:studioId/restore': (call) => studio.restore(call.params.studioId, actor(call)),

      'GET /studios/:studioId/settings': ({ params }) => studio.settings(params.studioId),
      'PATCH /studios/:studioId/settings': ({ params, body }) => studio.changeSettings(params.studioId, body),

      'GET /studios/:studioId/members': async ({ params, role }) => ({ items: await studio.members(params.studioId, role) }),
      'PATCH /studios/:studioId/members/:personId': (call) => studio.changeRole(call.params.studioId, call.params.personId, call.body.role, actor(call)),
      'DELETE /studios/:studioId/members/:personId': (call) => studio.removeMember(call.params.studioId, call.params.personId, actor(call)),
      'DELETE /studios/:studioId/membership': (call) => studio.removeMember(call.params.studioId, call.person.id, actor(call)),

      'GET /studios/:studioId/invitations': async ({ params }) => ({ items: await studio.invitations(params.studioId) }),
      'POST /studios/:studioId/invitations': async (call) => {
        const { invitation, link } = await studio.invite(call.params.studioId, call.body.role, call.body.note, actor(call));
        // Without a public address the link leads to where the person herself reached us.
        return { invitation, link: link.startsWith('/') ? `${call.req.protocol}://${call.req.get('host')}${link}` : link };
      },
      'DELETE /studios/:studioId/invitations/:id': (call) => studio.withdraw(call.params.studioId, call.params.id, actor(call)),
      'GET /invitations/:token': ({ params }) => studio.showInvitation(params.token),
      'POST /invitations/:token/accept': (call) => account.acceptInvitation(call.params.token, call.person.id, actor(call).address),

      'GET /studios/:studioId/audit': ({ params, query }) => studio.audit(params.studioId, query.before, query.limit),
    },
  });
}
