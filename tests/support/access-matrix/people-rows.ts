import type { TestApp } from '../server/test-app.ts';
import { everybody, signedIn, type MatrixRow } from './matrix-row.ts';

const newcomer = { email: 'newcomer@lab.example', roles: [], memberships: [] };
const account = { name: 'New Comer', password: 'slow copper rain window' };

export const peopleRows: MatrixRow[] = [
  {
    route: 'GET /api/people',
    prepare: () => ({ path: '/api/people' }),
    expected: signedIn(404, { administrator: 200 }),
  },
  {
    route: 'GET /api/people/labelers',
    prepare: () => ({ path: '/api/people/labelers' }),
    expected: signedIn(403, { administrator: 200, curator: 200 }),
  },
  {
    route: 'GET /api/people/:id',
    prepare: (app) => ({ path: `/api/people/${app.personIds.labeler}` }),
    expected: signedIn(404, { administrator: 200 }),
  },
  {
    route: 'PATCH /api/people/:id',
    prepare: (app) => ({ path: `/api/people/${app.personIds.labeler}`, body: { roles: ['curator'] } }),
    expected: signedIn(404, { administrator: 200 }),
  },
  {
    route: 'GET /api/invitations',
    prepare: () => ({ path: '/api/invitations' }),
    expected: signedIn(404, { administrator: 200 }),
  },
  {
    route: 'POST /api/invitations',
    prepare: () => ({ path: '/api/invitations', body: newcomer }),
    expected: signedIn(404, { administrator: 201 }),
  },
  {
    route: 'DELETE /api/invitations/:id',
    prepare: (app) => ({ path: `/api/invitations/${invite(app).id}` }),
    expected: signedIn(404, { administrator: 204 }),
  },
  {
    route: 'GET /api/invitations/:token',
    prepare: (app) => ({ path: `/api/invitations/${invite(app).token}` }),
    expected: everybody(200),
  },
  {
    route: 'POST /api/invitations/:token/accept',
    prepare: (app) => ({ path: `/api/invitations/${invite(app).token}/accept`, body: account }),
    expected: everybody(201),
  },
  {
    route: 'POST /api/setup',
    state: 'with a link that nobody was given',
    prepare: () => ({
      path: '/api/setup',
      body: { ...account, email: newcomer.email, token: 'x'.repeat(43) },
    }),
    expected: everybody(404),
  },
];

function invite(app: TestApp): { id: string; token: string } {
  const { id, link } = app.deps.services.invitations.create(app.actor('administrator'), { ...newcomer });
  return { id, token: new URL(link).searchParams.get('token') ?? '' };
}
