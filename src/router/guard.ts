import type { NavigationGuardReturn, RouteLocationNormalized } from 'vue-router';
import { useSession } from '../stores/session.ts';
import { useStudio } from '../stores/studio.ts';

/** Before each page: who is it, and does the studio in the address belong to her? What she may do there, the server decides. */
export async function guard(to: RouteLocationNormalized): Promise<NavigationGuardReturn> {
  const session = useSession();
  const studio = useStudio();
  if (!session.known && !(await session.tryLoad())) return false;

  if (!session.person) return to.meta.anyone ? true : { name: 'sign-in', query: to.path === '/' ? {} : { to: to.fullPath } };
  if (to.meta.signedOutOnly) return afterSignIn(to);

  const studioId = typeof to.params.studioId === 'string' ? to.params.studioId : null;
  if (studioId === null) return true;
  studio.enter(studioId);
  // Joined in another tab a moment ago?
  if (studio.role === null && (await session.tryLoad())) studio.enter(studioId);
  return studio.role === null && to.name !== 'not-found' ? { name: 'not-found', params: { anything: to.path.slice(1).split('/') }, replace: true } : true;
}

/** Where the person wanted to go before she was asked to sign in; only to a page of ours. */
export function afterSignIn(from: Pick<RouteLocationNormalized, 'query'>): string {
  const wanted = from.query.to;
  return typeof wanted === 'string' && /^\/(?![/\\])/.test(wanted) ? wanted : '/';
}
