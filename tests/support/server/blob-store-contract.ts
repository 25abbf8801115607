import { createHash } from 'node:crypto';
import { existsSync, writeFileSync } from 'node:fs';
import { Readable } from 'node:stream';
import { buffer } from 'node:stream/consumers';
import { expect, test } from 'vitest';
import { BlobMissingError, type BlobStore } from '../../../server/store/blob-store.ts';

const bytes = Buffer.from('the bytes of a recording');
const sha256 = createHash('sha256').update(bytes).digest('hex');
const unknown = '0'.repeat(64);

/** What every store of bytes promises; each adapter runs the same suite. */
export function blobStoreContract(storeOf: () => BlobStore): void {
  test('a stream is stored under the sha256 of its bytes', async () => {
    expect(await storeOf().putStream(Readable.from([bytes]))).toEqual({ sha256, sizeBytes: bytes.length });
    expect(await buffer(await storeOf().open(sha256))).toEqual(bytes);
  });

  test('a finished file is moved in, and its temporary name is gone', async () => {
    const temp = storeOf().tempPath();
    writeFileSync(temp, bytes);
    expect(await storeOf().putFile(temp, sha256)).toEqual({ sha256, sizeBytes: bytes.length });
    expect(existsSync(temp)).toBe(false);
    expect(await storeOf().has(sha256)).toBe(true);
  });

  test('storing the same bytes twice leaves them once, unchanged', async () => {
    await storeOf().putStream(Readable.from([bytes]));
    await storeOf().putStream(Readable.from([bytes]));
    expect(await buffer(await storeOf().open(sha256))).toEqual(bytes);
  });

  test('a range is half-open, as spans are', async () => {
    await storeOf().putStream(Readable.from([bytes]));
    expect(String(await buffer(await storeOf().open(sha256, { start: 4, end: 9 })))).toBe('bytes');
    expect((await buffer(await storeOf().open(sha256, { start: 4, end: 4 }))).length).toBe(0);
  });

  test.each([
    { start: -1, end: 3 },
    { start: 5, end: 4 },
    { start: 0, end: bytes.length + 1 },
  ])('a range outside of the bytes is refused: $start to $end', async (range) => {
    await storeOf().putStream(Readable.from([bytes]));
    await expect(storeOf().open(sha256, range)).rejects.toThrow(RangeError);
  });

  test('no bytes at all are bytes too', async () => {
    const stored = await storeOf().putStream(Readable.from([]));
    expect(stored.sizeBytes).toBe(0);
    expect((await buffer(await storeOf().open(stored.sha256))).length).toBe(0);
  });

  test('what was never stored is missing', async () => {
    expect(await storeOf().has(unknown)).toBe(false);
    await expect(storeOf().open(unknown)).rejects.toThrow(BlobMissingError);
    await expect(storeOf().sizeBytesOf(unknown)).rejects.toThrow(BlobMissingError);
  });

  test('a stream that breaks off leaves nothing', async () => {
    const broken = Readable.from(
      (function* () {
        yield bytes;
        throw new Error('the line broke');
      })(),
    );
    await expect(storeOf().putStream(broken)).rejects.toThrow('the line broke');
    expect(await storeOf().has(sha256)).toBe(false);
  });

  test('deleting is final, and deleting again is no error', async () => {
    await storeOf().putStream(Readable.from([bytes]));
    await storeOf().delete(sha256);
    await storeOf().delete(sha256);
    expect(await storeOf().has(sha256)).toBe(false);
  });

  test.each(['', '../../etc/passwd', unknown.slice(1), 'G'.repeat(64)])('%j is no name of bytes', (name) => {
    expect(() => storeOf().pathOf(name)).toThrow(RangeError);
  });
}
