import type { KeyObject } from 'node:crypto';
import jwt from 'jsonwebtoken';
import { z } from 'zod';

export const tokenLifeMs = 30 * 60_000;
export const renewAfterMs = 5 * 60_000;

const issuer = 'recalesce';
const audience = 'recalesce:session';
const type = 'session+jwt';
const algorithm = 'HS256';

export interface SessionClaims {
  personId: string;
  sessionId: string;
  issuedAtMs: number;
}

const claimsSchema = z.object({
  sub: z.uuid(),
  sid: z.uuid(),
  jti: z.string().min(1),
  iat: z.number().int(),
  exp: z.number().int(),
});

/** A signed token that names a session row; by itself it gives nobody anything. */
export function signSessionToken(key: KeyObject, claims: SessionClaims & { tokenId: string }): string {
  const iat = Math.floor(claims.issuedAtMs / 1000);
  const payload = { sid: claims.sessionId, iat, exp: iat + tokenLifeMs / 1000 };
  return jwt.sign(payload, key, {
    algorithm,
    issuer,
    audience,
    subject: claims.personId,
    jwtid: claims.tokenId,
    header: { alg: algorithm, typ: type },
  });
}

/** `null` for whatever is not exactly such a token: the library alone would take one without `exp` or with any `typ`. */
export function verifySessionToken(key: KeyObject, token: string, nowMs: number): SessionClaims | null {
  const verified = verify(key, token, nowMs);
  if (verified?.header.typ !== type || verified.header.alg !== algorithm) return null;
  const claims = claimsSchema.safeParse(verified.payload);
  if (!claims.success) return null;
  const { sub, sid, iat, exp } = claims.data;
  if (exp - iat > tokenLifeMs / 1000) return null;
  return { personId: sub, sessionId: sid, issuedAtMs: iat * 1000 };
}

function verify(key: KeyObject, token: string, nowMs: number): jwt.Jwt | null {
  try {
    return jwt.verify(token, key, {
      algorithms: [algorithm],
      issuer,
      audience,
      clockTimestamp: Math.floor(nowMs / 1000),
      complete: true,
    });
  } catch {
    return null;
  }
}
