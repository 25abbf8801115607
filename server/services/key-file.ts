import { createSecretKey, randomBytes, type KeyObject } from 'node:crypto';
import {
  chmodSync,
  closeSync,
  existsSync,
  fsyncSync,
  mkdirSync,
  openSync,
  readFileSync,
  statSync,
  writeSync,
} from 'node:fs';
import path from 'node:path';

const keyBytes = 32;
/** Each kind of token has a key of its own. */
export interface Keys {
  session: KeyObject;
}

export class KeyFileError extends Error {}

/** Reads the keys, making those that are missing; refuses a file that is too short or that others may read. */
export function loadKeys(folder: string): Keys {
  mkdirSync(folder, { recursive: true, mode: 0o700 });
  chmodSync(folder, 0o700);
  return { session: createSecretKey(loadKey(path.join(folder, 'session.key'))) };
}

function loadKey(file: string): Buffer {
  if (!existsSync(file)) createKey(file);
  const mode = statSync(file).mode & 0o777;
  if ((mode & 0o077) !== 0) {
    throw new KeyFileError(
      `Others may read the key file ${file}: run chmod 600 on it, or remove it to sign everybody out.`,
    );
  }
  const key = Buffer.from(readFileSync(file, 'utf8').trim(), 'base64url');
  if (key.length < keyBytes) {
    throw new KeyFileError(
      `The key file ${file} holds fewer than ${keyBytes} bytes: remove it, and a new one is made.`,
    );
  }
  return key;
}

function createKey(file: string): void {
  const handle = openSync(file, 'wx', 0o600);
  try {
    writeSync(handle, `${randomBytes(keyBytes).toString('base64url')}\n`);
    fsyncSync(handle);
  } finally {
    closeSync(handle);
  }
}
