import type { Actor } from '../../../shared/policy/actor.ts';
import { write } from '../../db/transaction.ts';
import type { Ground } from '../../ground.ts';
import type { SessionIdentity } from '../../http/authenticate.ts';
import type { ActorsService } from '../people/actors.service.ts';
import { isAlive } from './session-life.ts';
import { renewAfterMs, verifySessionToken } from './session-token.ts';
import { selectSession, updateSessionSeen, type SessionRow } from './sessions.queries.ts';
import type { SessionsService } from './sessions.service.ts';

/** Seen is written at most once a minute: it is read in hours. */
const seenGrainMs = 60_000;

export type IdentitiesService = ReturnType<typeof createIdentitiesService>;

interface Parts extends Pick<Ground, 'db' | 'clock' | 'keys'> {
  actors: ActorsService;
  sessions: SessionsService;
}

/** Who stands behind a request: the token only names a row; the row, the person and the roles are what counts. */
export function createIdentitiesService({ db, clock, keys, actors, sessions }: Parts) {
  function findBySessionToken(token: string, inUse: boolean): SessionIdentity | null {
    const now = clock.nowMs();
    const claims = verifySessionToken(keys.session, token, now);
    const session = claims === null ? undefined : selectSession(db, claims.sessionId);
    if (claims === null || session === undefined || !isAlive(session, claims.personId, now)) return null;
    const actor = actors.find(session.userId);
    if (actor === null) return null;
    if (inUse && now - session.lastSeenAtMs >= seenGrainMs) markSeen(session, now);
    const isOld = now - claims.issuedAtMs >= renewAfterMs;
    return {
      actor,
      sessionId: session.id,
      renewedToken: isOld ? sessions.issue(actor.id, session.id) : null,
    };
  }

  function markSeen(session: SessionRow, now: number): void {
    write(db, (tx) => {
      updateSessionSeen(tx, session.id, now);
      actors.markSeen(tx, session.userId);
    });
  }

  /** For an open event stream: the same person, if still signed in, with the rights of now. */
  function findAgain(identity: { actor: Actor; sessionId?: string }): Actor | null {
    if (identity.sessionId !== undefined) {
      const session = selectSession(db, identity.sessionId);
      if (session === undefined || !isAlive(session, identity.actor.id, clock.nowMs())) return null;
    }
    return actors.find(identity.actor.id);
  }

  return { findBySessionToken, findAgain };
}
