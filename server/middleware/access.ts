/** Who may call what. The only place that decides about roles; the rule of each route stands in the contract. */
import type { Request, Response } from 'express';
import type { Knex } from 'knex';
import type { RouteDefinition } from '../contract/route.ts';
import type { Role } from '../contract/shared.ts';
import { forbidden, notFound, notSignedIn } from '../errors/app-error.ts';
import type { Person } from './mount.ts';
import { ABSOLUTE_MS } from './session.ts';

const RANK: Record<Role, number> = { helper: 1, maker: 2, owner: 3 };
const UUID = /^[0-9a-f]{8}(-[0-9a-f]{4}){3}-[0-9a-f]{12}$/i;

export function createAccess(db: Knex) {
  return async function access(route: RouteDefinition, req: Request, res: Response): Promise<void> {
    if (route.access === 'anyone') return;
    const { personId, startedAt } = req.session;
    if (!personId || Date.now() - (startedAt ?? 0) > ABSOLUTE_MS) throw notSignedIn();
    // A sign-out or a removal that was made while the cookie was on its way holds at once: everything is read afresh.
    if (route.access === 'signed-in') {
      res.locals.person = await findPerson(db, personId);
      return;
    }
    const studioId = req.params.studioId ?? req.query.studioId;
    if (typeof studioId !== 'string' || !UUID.test(studioId)) throw notFound('This studio');
    const row = await db('memberships as m')
      .join('users as u', 'u.id', 'm.person_id')
      .join('studios as s', 's.id', 'm.studio_id')
      .where({ 'm.studio_id': studioId, 'm.person_id': personId })
      .first('u.id', 'u.name', 'u.email', 'm.role', 's.deleted_at');
    if (!row) {
      await findPerson(db, personId);
      throw notFound('This studio');
    }
    const role = row.role as Role;
    if (RANK[role] < RANK[route.access]) {
      req.log?.warn({ personId, studioId, role, needs: route.access, path: req.path }, 'refused by role');
      throw forbidden(refusal(role, route.access));
    }
    if ((row.deleted_at !== null) !== (route.deletedStudio ?? false)) throw notFound('This studio');
    res.locals.person = { id: row.id, name: row.name, email: row.email } satisfies Person;
    res.locals.role = role;
  };
}

async function findPerson(db: Knex, id: string): Promise<Person> {
  const person = await db('users').where({ id }).first('id', 'name', 'email');
  if (!person) throw notSignedIn();
  return person;
}

function refusal(role: Role, needs: Role): string {
  const who = needs === 'owner' ? 'Only an owner of the studio can do this' : 'Only makers and owners of the studio can do this';
  return `${who}; you are a ${role} here. Ask an owner if you need it.`;
}
