import { createHash, randomBytes } from 'node:crypto';

/** 256 random bits for a link or a token, told once; only the hash is kept. */
export function createSecret(prefix = ''): string {
  return prefix + randomBytes(32).toString('base64url');
}

/** The secret has full entropy, so one fast hash keeps it. */
export function hashSecret(secret: string): string {
  return createHash('sha256').update(secret).digest('hex');
}
