import { everybody, signedIn, type MatrixRow } from './matrix-row.ts';

/** Labs, audit, activity, health. */
export const serviceRows: MatrixRow[] = [
  { route: 'GET /api/labs', prepare: () => ({ path: '/api/labs' }), expected: signedIn(200) },
  {
    route: 'POST /api/labs',
    prepare: () => ({ path: '/api/labs', body: { name: 'Third Lab' } }),
    expected: signedIn(404, { administrator: 201 }),
  },
  {
    route: 'PATCH /api/labs/:id',
    prepare: (app) => ({ path: `/api/labs/${app.ownLabId}`, body: { name: 'Northlight Lab' } }),
    // Members know that their lab exists, so they are told that they may not.
    expected: signedIn(404, { administrator: 200, contributor: 403, reviewer: 403 }),
  },
  {
    route: 'GET /api/audit',
    prepare: () => ({ path: '/api/audit' }),
    expected: signedIn(404, { administrator: 200 }),
  },
  {
    route: 'GET /api/activity',
    prepare: () => ({ path: '/api/activity' }),
    expected: signedIn(200),
    endless: true,
  },
  { route: 'GET /api/health', prepare: () => ({ path: '/api/health' }), expected: everybody(200) },
];
