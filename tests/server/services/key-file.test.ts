import { chmodSync, mkdtempSync, rmSync, statSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import path from 'node:path';
import { afterEach, beforeEach, describe, expect, test } from 'vitest';
import { KeyFileError, loadKeys } from '../../../server/services/key-file.ts';

let folder: string;
beforeEach(() => {
  folder = mkdtempSync(path.join(tmpdir(), 'recalesce-keys-'));
});
afterEach(() => rmSync(folder, { recursive: true, force: true }));

const file = () => path.join(folder, 'session.key');

describe('the key file', () => {
  test('is made at the first start with 32 random bytes, readable by its owner only', () => {
    expect(loadKeys(folder).session.symmetricKeySize).toBe(32);
    expect(statSync(file()).mode & 0o777).toBe(0o600);
  });

  test('is the same at the next start', () => {
    expect(loadKeys(folder).session.equals(loadKeys(folder).session)).toBe(true);
  });

  test('is refused where others may read it', () => {
    loadKeys(folder);
    chmodSync(file(), 0o640);
    expect(() => loadKeys(folder)).toThrow(KeyFileError);
  });

  test('is refused where it holds fewer bytes', () => {
    writeFileSync(file(), Buffer.alloc(31).toString('base64url'), { mode: 0o600 });
    expect(() => loadKeys(folder)).toThrow(/fewer than 32 bytes/);
  });
});
