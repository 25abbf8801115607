import { describe, expect, it } from 'vitest';
import { createMemoryHistory, createRouter } from 'vue-router';
import type { RouteLocationNormalized } from 'vue-router';
import { abilityFor } from '@shared/policy/ability.ts';
import type { Actor } from '@shared/policy/actor.ts';
import { entriesFor } from '@/router/areas.ts';
import { decide, safeNext } from '@/router/guard.ts';
import { routes } from '@/router/routes.ts';

const lab = '0190a0b0-0000-7000-8000-000000000001';
const actors: Record<string, Actor> = {
  reader: { id: 'p', name: 'Reader', roles: [], memberships: [] },
  contributor: {
    id: 'p',
    name: 'Contributor',
    roles: [],
    memberships: [{ labId: lab, role: 'contributor' }],
  },
  reviewer: { id: 'p', name: 'Reviewer', roles: [], memberships: [{ labId: lab, role: 'reviewer' }] },
  labeler: { id: 'p', name: 'Labeler', roles: ['labeler'], memberships: [] },
  curator: { id: 'p', name: 'Curator', roles: ['curator'], memberships: [] },
  administrator: { id: 'p', name: 'Administrator', roles: ['administrator'], memberships: [] },
};

function resolve(path: string): RouteLocationNormalized {
  const router = createRouter({ history: createMemoryHistory(), routes });
  return router.resolve(path) as unknown as RouteLocationNormalized;
}

function ask(path: string, name: string | null) {
  const actor = name === null ? null : (actors[name] ?? null);
  return decide(resolve(path), { isSignedIn: actor !== null, ability: abilityFor(actor) });
}

describe('the guard', () => {
  it('sends a visitor to sign in and back to the page asked for', () => {
    expect(ask('/runs?lab=a', null)).toEqual({ name: 'sign-in', query: { next: '/runs?lab=a' } });
  });

  it('shows a visitor without a wish the published releases', () => {
    expect(ask('/', null)).toEqual({ name: 'releases' });
  });

  it.each(['/releases', '/releases/1', '/invitations/abc', '/nowhere'])('lets anybody into %s', (path) => {
    expect(ask(path, null)).toBe(true);
    expect(ask(path, 'reader')).toBe(true);
  });

  it('does not ask somebody who is signed in to sign in', () => {
    expect(ask('/sign-in?next=/runs', 'contributor')).toBe('/runs');
  });

  it.each([
    ['/people', 'contributor'],
    ['/audit', 'curator'],
    ['/reviews', 'administrator'],
    ['/collections', 'contributor'],
    ['/bring-in', 'reader'],
    ['/runs/new', 'curator'],
  ])('answers %s for a %s as if it were not there', (path, name) => {
    expect(ask(path, name)).toMatchObject({ name: 'not-found' });
  });

  it.each([
    ['/people', 'administrator'],
    ['/audit', 'administrator'],
    ['/reviews', 'reviewer'],
    ['/collections', 'curator'],
    ['/bring-in', 'contributor'],
    ['/bench/1', 'labeler'],
    ['/tokens', 'reader'],
  ])('lets into %s a %s', (path, name) => {
    expect(ask(path, name)).toBe(true);
  });
});

describe('the way back after signing in', () => {
  it.each(['//evil.example', '/\\evil.example', 'https://evil.example', undefined, ['/a']])(
    'never leaves this site by %s',
    (next) => {
      expect(safeNext(next)).toBe('/');
    },
  );

  it('keeps a page of ours with its query', () => {
    expect(safeNext('/runs?lab=a#b')).toBe('/runs?lab=a#b');
  });
});

describe('the navigation', () => {
  it.each([
    [null, ['Releases']],
    ['reader', ['Home', 'Releases']],
    ['contributor', ['Home', 'Runs', 'Bring in', 'Sensors', 'Releases']],
    ['administrator', ['Home', 'Releases', 'People', 'Labs', 'Audit']],
    ['labeler', ['Home', 'Releases']],
  ])('of a %s has what they may use', (name, labels) => {
    const actor = name === null ? null : (actors[name] ?? null);
    expect(entriesFor(abilityFor(actor), actor !== null).map((entry) => entry.label)).toEqual(labels);
  });
});
