import { packRules } from '@casl/ability/extra';
import type { z } from 'zod';
import type { CurrentUser, SignIn, sessionsSchema } from '../../../shared/contract/sessions.ts';
import { abilityFor } from '../../../shared/policy/ability.ts';
import type { Actor } from '../../../shared/policy/actor.ts';
import type { Tx } from '../../db/client.ts';
import { write } from '../../db/transaction.ts';
import type { Ground } from '../../ground.ts';
import { ProblemError, notFound } from '../../http/problem.ts';
import { toInstant } from '../../services/clock.ts';
import type { AuditService } from '../audit/audit.service.ts';
import type { ActorsService } from '../people/actors.service.ts';
import { isAlive } from './session-life.ts';
import { signSessionToken } from './session-token.ts';
import {
  insertSession,
  selectOpenSessionsOf,
  updateAllEnded,
  updateSessionEnded,
} from './sessions.queries.ts';

const longestUserAgent = 200;

export type SessionsService = ReturnType<typeof createSessionsService>;

interface Parts extends Pick<Ground, 'db' | 'clock' | 'ids' | 'hasher' | 'keys'> {
  audit: AuditService;
  actors: ActorsService;
}

export interface StartedSession {
  /** For the cookie. */
  token: string;
  user: CurrentUser;
}

export function createSessionsService({ db, clock, ids, hasher, keys, audit, actors }: Parts) {
  /** The hash that is checked for an unknown address, so that the answer takes as long as for a known one. */
  const unknownHash = hasher.hash('a password that nobody has');
  unknownHash.catch(() => undefined);

  async function signIn(input: SignIn, userAgent: string): Promise<StartedSession> {
    const found = actors.findCredentials(input.email);
    const matches = await hasher.verify(found?.passwordHash ?? (await unknownHash), input.password);
    if (found === null || !matches) {
      throw new ProblemError('sign-in-refused', 'No account has this e-mail address with this password.');
    }
    return start(found.personId, userAgent);
  }

  function start(personId: string, userAgent: string): StartedSession {
    const actor = actors.find(personId);
    if (actor === null) throw new ProblemError('sign-in-refused', 'This account is not in use.');
    const now = clock.nowMs();
    const session = { id: ids.next(), userId: personId, userAgent: userAgent.slice(0, longestUserAgent) };
    write(db, (tx) => {
      insertSession(tx, { ...session, createdAtMs: now, lastSeenAtMs: now, endedAtMs: null });
      actors.markSeen(tx, personId);
      record(tx, 'session.started', personId, session.id);
    });
    return { token: issue(personId, session.id), user: describe(actor) };
  }

  function issue(personId: string, sessionId: string): string {
    return signSessionToken(keys.session, {
      personId,
      sessionId,
      issuedAtMs: clock.nowMs(),
      tokenId: ids.next(),
    });
  }

  function describe(actor: Actor): CurrentUser {
    return { ...actors.requireFacts(actor.id), rules: packRules(abilityFor(actor).rules) };
  }

  function list(actor: Actor, currentSessionId: string | null): z.input<typeof sessionsSchema> {
    const now = clock.nowMs();
    const alive = selectOpenSessionsOf(db, actor.id).filter((session) => isAlive(session, actor.id, now));
    return {
      items: alive.map(({ id, userAgent, createdAtMs, lastSeenAtMs }) => ({
        id,
        userAgent,
        createdAt: toInstant(createdAtMs),
        lastSeenAt: toInstant(lastSeenAtMs),
        current: id === currentSessionId,
      })),
    };
  }

  function end(actor: Actor, sessionId: string): void {
    write(db, (tx) => {
      const ended = updateSessionEnded(tx, { id: sessionId, userId: actor.id, nowMs: clock.nowMs() });
      if (!ended) throw notFound('This session');
      record(tx, 'session.ended', actor.id, sessionId);
    });
  }

  /** Everything that lets somebody in, personal tokens too. */
  function endAllOf(tx: Tx, personId: string): void {
    updateAllEnded(tx, personId, clock.nowMs());
  }

  function record(tx: Tx, action: string, personId: string, sessionId: string): void {
    audit.record(tx, { personId, action, subjectType: 'Session', subjectId: sessionId });
  }

  return { signIn, start, issue, describe, list, end, endAllOf };
}
