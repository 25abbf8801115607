import { mkdtempSync, readdirSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import path from 'node:path';
import { Readable } from 'node:stream';
import { afterEach, beforeEach, describe, expect, test } from 'vitest';
import { createDiskStore } from '../../../server/store/disk-store.ts';
import type { BlobStore } from '../../../server/store/blob-store.ts';
import { blobStoreContract } from '../../support/server/blob-store-contract.ts';

let root: string;
let store: BlobStore;
beforeEach(() => {
  root = mkdtempSync(path.join(tmpdir(), 'recalesce-store-'));
  store = createDiskStore(root);
});
afterEach(() => rmSync(root, { recursive: true, force: true }));

describe('the store on disk keeps what every store promises', () => {
  blobStoreContract(() => store);
});

describe('the store on disk', () => {
  test('keeps a file in two levels of folders named by its hash', async () => {
    const { sha256 } = await store.putStream(Readable.from(['x']));
    expect(store.pathOf(sha256)).toBe(path.join(root, sha256.slice(0, 2), sha256.slice(2, 4), sha256));
  });

  test('leaves nothing among the incoming files', async () => {
    await store.putStream(Readable.from(['x']));
    const broken = Readable.from(
      (function* () {
        yield 'y';
        throw new Error('the line broke');
      })(),
    );
    await expect(store.putStream(broken)).rejects.toThrow();
    expect(readdirSync(path.join(root, 'incoming'))).toEqual([]);
  });
});
