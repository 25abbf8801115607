import { hashSecret, createSecret } from '../../../server/services/secret.ts';
import { write } from '../../../server/db/transaction.ts';
import { insertSession, insertToken } from '../../../server/features/sessions/sessions.queries.ts';
import type { TestApp } from '../server/test-app.ts';
import { everybody, signedIn, type MatrixRow } from './matrix-row.ts';

const dayMs = 86_400_000;

export const sessionsRows: MatrixRow[] = [
  {
    route: 'POST /api/sessions',
    state: 'with a wrong password',
    prepare: () => ({
      path: '/api/sessions',
      body: { email: 'curator@lab.example', password: 'not this one' },
    }),
    expected: everybody(401),
  },
  {
    route: 'GET /api/sessions/current',
    prepare: () => ({ path: '/api/sessions/current' }),
    expected: everybody(200),
  },
  {
    route: 'DELETE /api/sessions/current',
    prepare: () => ({ path: '/api/sessions/current' }),
    expected: everybody(204),
  },
  { route: 'GET /api/sessions', prepare: () => ({ path: '/api/sessions' }), expected: signedIn(200) },
  {
    route: 'DELETE /api/sessions/:id',
    state: "the contributor's session",
    prepare: (app) => ({ path: `/api/sessions/${addSession(app)}` }),
    expected: signedIn(404, { contributor: 204 }),
  },
  {
    route: 'PUT /api/password',
    state: 'with a wrong present password',
    prepare: () => ({
      path: '/api/password',
      body: { currentPassword: 'not this one', newPassword: 'several quiet lanterns drift' },
    }),
    expected: signedIn(422),
  },
  { route: 'GET /api/tokens', prepare: () => ({ path: '/api/tokens' }), expected: signedIn(200) },
  {
    route: 'POST /api/tokens',
    prepare: () => ({ path: '/api/tokens', body: { name: 'night script', expiresInDays: 30 } }),
    expected: signedIn(201),
  },
  {
    route: 'DELETE /api/tokens/:id',
    state: "the contributor's token",
    prepare: (app) => ({ path: `/api/tokens/${addToken(app)}` }),
    expected: signedIn(404, { contributor: 204 }),
  },
];

function addSession({ deps, personIds, clock }: TestApp): string {
  const id = deps.ids.next();
  const now = clock.nowMs();
  const times = { createdAtMs: now, lastSeenAtMs: now, endedAtMs: null };
  write(deps.db, (tx) =>
    insertSession(tx, { id, userId: personIds.contributor, userAgent: 'another browser', ...times }),
  );
  return id;
}

function addToken({ deps, personIds, clock }: TestApp): string {
  const id = deps.ids.next();
  const now = clock.nowMs();
  const times = { createdAtMs: now, expiresAtMs: now + dayMs, lastUsedAtMs: null, revokedAtMs: null };
  const facts = {
    userId: personIds.contributor,
    name: 'night script',
    tokenHash: hashSecret(createSecret()),
  };
  write(deps.db, (tx) => insertToken(tx, { id, ...facts, ...times }));
  return id;
}
