import type { RouteLocationNormalized, RouteLocationRaw } from 'vue-router';
import type { AppAbility } from '@shared/policy/ability.ts';
import { mayEnter } from '@/router/areas.ts';

interface Visitor {
  isSignedIn: boolean;
  ability: AppAbility;
}

/** Only paths of this application: an address of another site must not be reached through ours. */
export function safeNext(next: unknown): string {
  if (typeof next !== 'string' || !next.startsWith('/') || /^\/[/\\]/.test(next)) return '/';
  return next;
}

function toNotFound(to: RouteLocationNormalized): RouteLocationRaw {
  return { name: 'not-found', params: { path: to.path.slice(1).split('/') }, query: to.query, hash: to.hash };
}

function toSignIn(to: RouteLocationNormalized): RouteLocationRaw {
  if (to.path === '/') return { name: 'releases' };
  return { name: 'sign-in', query: { next: to.fullPath } };
}

/** Where a visitor who asks for a page is sent; true lets them in. What may not be seen looks like what is not there. */
export function decide(to: RouteLocationNormalized, visitor: Visitor): true | RouteLocationRaw {
  const access = to.meta.access;
  if (access === 'anyone') return true;
  if (access === 'nobody') return visitor.isSignedIn ? safeNext(to.query.next) : true;
  if (!visitor.isSignedIn) return toSignIn(to);
  if (access === undefined || mayEnter(access, visitor.ability)) return true;
  return toNotFound(to);
}
