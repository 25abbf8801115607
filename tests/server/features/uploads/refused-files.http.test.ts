import { afterAll, beforeAll, describe, expect, test } from 'vitest';
import { uploads } from '../../../../server/db/schema/uploads.ts';
import { smallWav } from '../../../support/server/seed-recordings.ts';
import { nothingStored, storedState } from '../../../support/server/stored-state.ts';
import { createTestApp, type TestApp } from '../../../support/server/test-app.ts';
import { complete, sendWhole } from '../../../support/server/tus.ts';
import { chunkOffset, withUint16, withUint32 } from '../../../support/wav/patch-bytes.ts';

let app: TestApp;
beforeAll(() => {
  app = createTestApp();
});
afterAll(() => app.close());

const wav = smallWav();
const format = chunkOffset(wav, 'fmt ') + 8;
const data = chunkOffset(wav, 'data');
const text = (content: string) => new TextEncoder().encode(content.padEnd(200, ' '));

/** Places in the format chunk: tag 0, channels 2, rate 4, block align 12, bits 14. */
const hostile: [name: string, bytes: Uint8Array, sentence: RegExp][] = [
  ['an MP3 file with another ending', text('ID3\u0004\u0000'), /MP3/],
  ['plain text', text('not a recording at all'), /./],
  ['a header and nothing else', wav.slice(0, data), /no audio/],
  ['a header cut within the format', wav.slice(0, format + 6), /format/],
  ['no whole frame', wav.slice(0, data + 9), /not a single whole frame|no audio/],
  ['a compressed tag (ADPCM)', withUint16(wav, format, 2), /./],
  ['a tag that nobody knows', withUint16(wav, format, 0x4242), /./],
  ['no channels', withUint16(wav, format + 2, 0), /channel/],
  ['65,535 channels', withUint16(wav, format + 2, 65_535), /channel/],
  ['a rate of 0', withUint32(wav, format + 4, 0), /rate/],
  ['a rate of 4 GHz', withUint32(wav, format + 4, 4_000_000_000), /rate/],
  ['a block align that does not fit', withUint16(wav, format + 12, 7), /./],
  ['samples of 12 bits', withUint16(wav, format + 14, 12), /./],
  ['a big-endian file', withFourCc(wav, 'RIFX'), /./],
  ['a form of another kind', withFourCc(wav, 'AVI ', 8), /./],
];

function withFourCc(bytes: Uint8Array, id: string, at = 0): Uint8Array {
  const copy = bytes.slice();
  copy.set(new TextEncoder().encode(id), at);
  return copy;
}

describe('a file that cannot be used', () => {
  test.each(hostile)('%s is refused with a sentence and leaves nothing', async (_name, bytes, sentence) => {
    const id = await sendWhole(app, bytes);
    const answer = await complete(app, id);
    expect([answer.status, answer.body.code]).toEqual([422, 'file-refused']);
    expect(answer.body.detail).toMatch(sentence);
    expect(answer.body.detail).toMatch(/^[A-Z].{15,}\.$/s);
    expect(storedState(app)).toEqual(nothingStored);
    const rows = app.deps.db.select().from(uploads).all();
    expect(rows.find((row) => row.id === id)).toMatchObject({ state: 'cancelled', recordingId: null });
  });

  test('a time expansion past 20 MHz is refused in the same way', async () => {
    const id = await sendWhole(app, wav, { timeExpansion: 1000 });
    expect((await complete(app, id)).body.detail).toContain('20 MHz');
    expect(storedState(app)).toEqual(nothingStored);
  });
});

describe('a file that is odd but usable', () => {
  test.each([
    ['cut short', wav.slice(0, data + 8 + 5000), /cut short/],
    ['a recorder that was cut off', withUint32(wav, data + 4, 0xffffffff), /end of the file/],
  ])('%s is taken with a warning', async (_name, bytes, warning) => {
    const id = await sendWhole(app, bytes);
    const { recording } = (await complete(app, id)).body;
    expect(recording.format.warnings.join(' ')).toMatch(warning);
  });
});
