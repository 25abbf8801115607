import { describe, expect, it } from 'vitest';
import { bytesSource } from '../../../shared/audio/byte-source.ts';
import { flacFrameAt } from '../../../shared/audio/flac-frame-header.ts';
import { readFlacHeader, type FlacHeader } from '../../../shared/audio/flac-header.ts';
import { personalMetadata } from '../../../shared/audio/personal-metadata.ts';
import { asciiBytes, concatBytes } from '../../../shared/audio/wav-envelope.ts';
import { countingSource } from '../../support/wav/counting-source.ts';
import { fixtureBytes, fixtureNames, formatFixture } from '../../support/wav/format-fixtures.ts';

const names = fixtureNames(/\.flac$/);

function headerOf(bytes: Uint8Array): Promise<FlacHeader> {
  return readFlacHeader(bytesSource(bytes));
}

function patched(bytes: Uint8Array, at: number, values: number[]): Uint8Array {
  const copy = bytes.slice();
  copy.set(values, at);
  return copy;
}

describe('FLAC files of other programs', () => {
  it.each(names)('%s: its header says what ffprobe says', async (name) => {
    const { sampleRateHz, channels, bitsPerSample, samples } = formatFixture(name);
    const { format } = await headerOf(fixtureBytes(name));
    expect(format).toEqual({
      container: 'FLAC',
      encoding: 'integer',
      ...{ sampleRateHz, channels, bitsPerSample },
      frames: samples[0]!.length,
      extensible: false,
      warnings: [],
    });
  });

  it('one written into a pipe, whose header does not know its length, is counted to its last frame', async () => {
    const bytes = fixtureBytes('pipe.flac');
    // RFC 9639, 8.2: the low 32 bits of the number of samples stand at byte 14 of the stream info.
    expect([...bytes.subarray(22, 26)]).toEqual([0, 0, 0, 0]);
    expect((await headerOf(bytes)).format.frames).toBe(240);
  });

  it('the names in its comments are read and told', async () => {
    const { metadata } = await headerOf(fixtureBytes('ff-tags.flac'));
    expect(metadata).toContainEqual({ chunk: 'Vorbis', key: 'ARTIST', value: 'A. Person' });
    expect(metadata).toContainEqual({ chunk: 'Vorbis', key: 'LOCATION', value: '59.9139, 10.7522' });
    const kinds = personalMetadata(metadata).map(({ key, kind }) => [key, kind]);
    expect(kinds).toEqual([
      ['ARTIST', 'person'],
      ['LOCATION', 'place'],
    ]);
  });

  it('a file cut short is counted to its last frame, with a warning', async () => {
    const whole = fixtureBytes('sox-1mhz.flac');
    // A second block of 300 frames is claimed: the total becomes 600.
    const { format } = await headerOf(patched(whole, 24, [0x02, 0x58]));
    expect(format.frames).toBe(300);
    expect(format.warnings).toEqual([
      'The file is cut short: 300 frames of audio are missing (50 % of what its header says). The 300 that are there were taken.',
    ]);
  });

  it('a picture is told by its presence alone', async () => {
    const bytes = fixtureBytes('sox-8.flac');
    const picture = concatBytes([Uint8Array.of(6, 0, 0, 5), new Uint8Array(5)]);
    const { metadata } = await headerOf(concatBytes([bytes.subarray(0, 42), picture, bytes.subarray(42)]));
    expect(metadata).toContainEqual({ chunk: 'PICTURE', key: 'unread', value: '5 bytes' });
    expect(personalMetadata(metadata).map(({ kind }) => kind)).toContain('unread');
  });

  it('little is read of it, whatever its blocks claim', async () => {
    const bytes = fixtureBytes('ff-16.flac');
    const source = countingSource(bytes);
    await readFlacHeader(source);
    expect(source.bytesRead()).toBeLessThan(2 * bytes.length + 8192);
    const claiming = countingSource(patched(bytes, 43, [0xff, 0xff, 0xff]));
    await expect(readFlacHeader(claiming)).rejects.toMatchObject({ code: 'no-data' });
    expect(claiming.bytesRead()).toBeLessThan(40_000);
  });
});

describe('FLAC files that are refused', () => {
  const sound = fixtureBytes('ff-16.flac');
  it.each([
    ['nothing after the magic', sound.subarray(0, 4), 'broken-format'],
    ['a first block that is no stream info', patched(sound, 4, [0x01]), 'broken-format'],
    ['a rate of 0', patched(sound, 18, [0, 0, sound[20]! & 0x0f]), 'rate'],
    // Bits less one lie in the last bit of byte 20 and the first four of byte 21.
    ['samples of 12 bits', patched(sound, 20, [sound[20]! & 0xfe, 0xb0 | (sound[21]! & 0x0f)]), 'width'],
    ['samples of 20 bits', patched(sound, 20, [sound[20]! | 1, 0x30 | (sound[21]! & 0x0f)]), 'width'],
    ['samples of 32 bits', patched(sound, 20, [sound[20]! | 1, 0xf0 | (sound[21]! & 0x0f)]), 'width'],
    ['no audio', sound.subarray(0, 42), 'no-data'],
    ['a cut before the first frame', sound.subarray(0, 8200), 'no-frames'],
    ['endless blocks', concatBytes([sound.subarray(0, 42), new Uint8Array(8000)]), 'no-data'],
  ])('%s', async (_, bytes, code) => {
    const refused: unknown = await headerOf(bytes).catch((error: unknown) => error);
    expect(refused).toMatchObject({ name: 'RefusedFileError', code });
    expect((refused as Error).message).toMatch(/^[A-Z].*\.$/);
  });
});

describe('the header of a frame', () => {
  /** RFC 9639, appendix D.1: a stereo frame of one sample in 16 bits, at byte 42 of the example. */
  const example = [0xff, 0xf8, 0x69, 0x18, 0x00, 0x00, 0xbf];
  const stream = { sampleRateHz: 44_100, bitsPerSample: 16, channels: 2, maxBlockFrames: 4096 };

  it('of the example of RFC 9639 is read', () => {
    const bytes = Uint8Array.from([...asciiBytes('some'), ...example, 0x03, 0x58]);
    expect(flacFrameAt(bytes, 4, stream)).toEqual({ startFrame: 0, frames: 1 });
  });

  it('with one bit wrong is none', () => {
    for (let bit = 0; bit < 8 * example.length; bit++) {
      const bytes = Uint8Array.from([...example, 0x03, 0x58]);
      bytes[bit >> 3]! ^= 0x80 >> (bit & 7);
      expect(flacFrameAt(bytes, 0, stream), `bit ${bit}`).toBeUndefined();
    }
  });
});
