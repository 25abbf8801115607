import { createSecretKey, randomBytes, randomUUID, type KeyObject } from 'node:crypto';
import jwt from 'jsonwebtoken';
import { describe, expect, test } from 'vitest';
import {
  signSessionToken,
  tokenLifeMs,
  verifySessionToken,
} from '../../../../server/features/sessions/session-token.ts';

const key = createSecretKey(randomBytes(32));
const nowMs = Date.UTC(2031, 4, 6);
const nowS = nowMs / 1000;
const personId = randomUUID();
const sessionId = randomUUID();

const good = {
  sub: personId,
  sid: sessionId,
  jti: 'j',
  iat: nowS,
  exp: nowS + 1800,
  iss: 'recalesce',
  aud: 'recalesce:session',
};
const header = { alg: 'HS256', typ: 'session+jwt' };

function forge(
  claims: object,
  options: { header?: object; key?: KeyObject; algorithm?: jwt.Algorithm } = {},
): string {
  const algorithm = options.algorithm ?? 'HS256';
  return jwt.sign(claims, options.key ?? key, {
    algorithm,
    header: { ...header, alg: algorithm, ...options.header },
    noTimestamp: !('iat' in claims),
  });
}

function without(name: string): object {
  return Object.fromEntries(Object.entries(good).filter(([claim]) => claim !== name));
}

function unsigned(): string {
  const part = (value: object) => Buffer.from(JSON.stringify(value)).toString('base64url');
  return `${part({ ...header, alg: 'none' })}.${part(good)}.`;
}

describe('the token of a session', () => {
  test('names the session and the person it was made for', () => {
    const token = signSessionToken(key, { personId, sessionId, issuedAtMs: nowMs, tokenId: 'j' });
    expect(verifySessionToken(key, token, nowMs)).toEqual({ personId, sessionId, issuedAtMs: nowMs });
  });

  test('is good for thirty minutes, the end not included', () => {
    const token = signSessionToken(key, { personId, sessionId, issuedAtMs: nowMs, tokenId: 'j' });
    expect(verifySessionToken(key, token, nowMs + tokenLifeMs - 1000)).not.toBeNull();
    expect(verifySessionToken(key, token, nowMs + tokenLifeMs)).toBeNull();
  });

  test('the forger of these tests makes good ones when asked to', () => {
    expect(verifySessionToken(key, forge(good), nowMs)).not.toBeNull();
  });

  test.each<readonly [string, string]>([
    ['an unsigned one', unsigned()],
    ['another key', forge(good, { key: createSecretKey(randomBytes(32)) })],
    [
      'HS512 with the right key',
      forge(good, { algorithm: 'HS512', key: createSecretKey(Buffer.concat([key.export(), key.export()])) }),
    ],
    ['HS384', forge(good, { algorithm: 'HS384' })],
    ['another typ', forge(good, { header: { typ: 'JWT' } })],
    ['a longer life than we give', forge({ ...good, exp: nowS + 86_400 })],
    ['another issuer', forge({ ...good, iss: 'elsewhere' })],
    ['another audience', forge({ ...good, aud: 'recalesce:invitation' })],
    ['a person that is no id', forge({ ...good, sub: 'admin' })],
    ['a truncated one', forge(good).slice(0, -4)],
    ['ten kilobytes of nothing', 'x'.repeat(10_240)],
    ['nothing', ''],
    ...['sub', 'sid', 'jti', 'iat', 'exp', 'iss', 'aud'].map(
      (name) => [`no ${name}`, forge(without(name))] as const,
    ),
  ])('is refused: %s', (_what, token) => {
    expect(verifySessionToken(key, token, nowMs)).toBeNull();
  });
});
