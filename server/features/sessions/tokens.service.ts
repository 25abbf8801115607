import type { z } from 'zod';
import type {
  createdTokenSchema,
  CreateToken,
  tokensSchema,
  tokenRowSchema,
} from '../../../shared/contract/sessions.ts';
import type { Actor } from '../../../shared/policy/actor.ts';
import type { Tx } from '../../db/client.ts';
import { write } from '../../db/transaction.ts';
import type { Ground } from '../../ground.ts';
import { conflict, notFound } from '../../http/problem.ts';
import { toInstant } from '../../services/clock.ts';
import { createSecret, hashSecret } from '../../services/secret.ts';
import type { AuditService } from '../audit/audit.service.ts';
import type { ActorsService } from '../people/actors.service.ts';
import {
  insertToken,
  selectTokenByHash,
  selectUsableTokensOf,
  updateTokenRevoked,
  updateTokenUsed,
  type TokenRow,
} from './sessions.queries.ts';

const dayMs = 24 * 60 * 60_000;
const usedGrainMs = 60_000;
const mostTokens = 20;
/** Lets people and scanners see at once what a leaked string is. */
const tokenPrefix = 'rcl_';

export type TokensService = ReturnType<typeof createTokensService>;

interface Parts extends Pick<Ground, 'db' | 'clock' | 'ids'> {
  audit: AuditService;
  actors: ActorsService;
}

/** Personal tokens for scripts: they act as the person, with the rights the person has at that moment. */
export function createTokensService({ db, clock, ids, audit, actors }: Parts) {
  function find(token: string): Actor | null {
    const now = clock.nowMs();
    const row = token.startsWith(tokenPrefix) ? selectTokenByHash(db, hashSecret(token)) : undefined;
    if (row === undefined || row.revokedAtMs !== null || row.expiresAtMs <= now) return null;
    if (now - (row.lastUsedAtMs ?? 0) >= usedGrainMs) updateTokenUsed(db, row.id, now);
    return actors.find(row.userId);
  }

  function list(actor: Actor): z.input<typeof tokensSchema> {
    return { items: selectUsableTokensOf(db, actor.id, clock.nowMs()).map(toTokenRow) };
  }

  function create(actor: Actor, input: CreateToken): z.input<typeof createdTokenSchema> {
    const token = createSecret(tokenPrefix);
    const now = clock.nowMs();
    const row: TokenRow = {
      id: ids.next(),
      userId: actor.id,
      name: input.name,
      tokenHash: hashSecret(token),
      createdAtMs: now,
      expiresAtMs: now + input.expiresInDays * dayMs,
      lastUsedAtMs: null,
      revokedAtMs: null,
    };
    write(db, (tx) => {
      if (selectUsableTokensOf(tx, actor.id, now).length >= mostTokens) {
        throw conflict(`There are ${mostTokens} tokens already: revoke one that is not used any more.`);
      }
      insertToken(tx, row);
      record(tx, actor, 'token.created', row.id);
    });
    return { ...toTokenRow(row), token };
  }

  function revoke(actor: Actor, tokenId: string): void {
    write(db, (tx) => {
      const revoked = updateTokenRevoked(tx, { id: tokenId, userId: actor.id, nowMs: clock.nowMs() });
      if (!revoked) throw notFound('This token');
      record(tx, actor, 'token.revoked', tokenId);
    });
  }

  function record(tx: Tx, actor: Actor, action: string, tokenId: string): void {
    audit.record(tx, { personId: actor.id, action, subjectType: 'Token', subjectId: tokenId });
  }

  return { find, list, create, revoke };
}

function toTokenRow(row: TokenRow): z.input<typeof tokenRowSchema> {
  return {
    id: row.id,
    name: row.name,
    createdAt: toInstant(row.createdAtMs),
    expiresAt: toInstant(row.expiresAtMs),
    lastUsedAt: row.lastUsedAtMs === null ? null : toInstant(row.lastUsedAtMs),
  };
}
