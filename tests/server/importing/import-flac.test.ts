import { describe, expect, it } from 'vitest';
import { fixtureBytes, fixtureNames, formatFixture } from '../../support/wav/format-fixtures.ts';
import { importFolder } from './imported.ts';

const { bring } = importFolder();
const names = fixtureNames(/\.flac$/);

describe('a FLAC file', () => {
  it.each(names)('%s becomes WAV with every sample as another program decodes it', async (name) => {
    const { bytes, samples, bitsPerSample, sampleRateHz, channels } = formatFixture(name);
    const imported = await bring(bytes, { layout: null });
    expect(imported.samples).toEqual(samples.map((channel) => Float32Array.from(channel)));
    const facts = { encoding: 'integer', bitsPerSample, sampleRateHz, channels, warnings: [] };
    expect(imported.wav.format).toMatchObject({ container: 'RIFF', ...facts });
    expect(imported.format).toMatchObject({ container: 'FLAC', ...facts, frames: samples[0]!.length });
  });

  it('whose samples meet both ends of the scale keeps them', () => {
    const { samples } = formatFixture('ff-24.flac');
    const codes = samples.flatMap((channel) => [...channel]).map((sample) => sample * 2 ** 23);
    expect(Math.min(...codes)).toBe(-(2 ** 23));
    expect(codes.every(Number.isInteger)).toBe(true);
  });

  it('cut within its last frame gives the frames before it, with a warning', async () => {
    const bytes = manyBlocks();
    const { format, samples } = await bring(bytes.subarray(0, bytes.length - 100), { layout: null });
    const whole = await bring(bytes, { layout: null });
    expect(format.frames).toBeLessThan(whole.format.frames);
    expect(format.warnings).toHaveLength(1);
    expect(format.warnings[0]).toMatch(/^The file is cut short: .* frames of audio are missing/);
    expect(samples[0]).toEqual(whole.samples[0]!.subarray(0, format.frames));
  });

  it('that lacks a frame in its middle is damaged, since all that follows would stand too early', async () => {
    const bytes = manyBlocks();
    const [second, third] = frameOffsets(bytes).slice(1);
    const without = Buffer.concat([bytes.subarray(0, second), bytes.subarray(third)]);
    await expect(bring(without, { layout: null })).rejects.toMatchObject({ code: 'damaged' });
  });

  it('with one wrong byte in its audio is damaged', async () => {
    const bytes = manyBlocks().slice();
    const at = frameOffsets(bytes)[2]! + 50;
    bytes[at]! ^= 0x10;
    await expect(bring(bytes, { layout: null })).rejects.toMatchObject({ code: 'damaged' });
  });

  it('whose checksum is of other samples is damaged', async () => {
    const bytes = fixtureBytes('ff-16.flac');
    bytes[30]! ^= 1;
    await expect(bring(bytes, { layout: null })).rejects.toMatchObject({
      name: 'RefusedFileError',
      code: 'damaged',
    });
  });

  it('without a checksum is taken', async () => {
    const bytes = fixtureBytes('ff-16.flac');
    bytes.fill(0, 26, 42);
    expect((await bring(bytes, { layout: null })).format.frames).toBe(240);
  });
});

/** Four blocks of 480 samples and a shorter one. */
function manyBlocks(): Uint8Array {
  return fixtureBytes('ff-blocks.flac');
}

/** Where its frames begin: the sync code with numbers that count up (RFC 9639, 9.1), found by hand. */
function frameOffsets(bytes: Uint8Array): number[] {
  const offsets: number[] = [];
  for (let at = 0; at + 6 < bytes.length; at++) {
    const isSync = bytes[at] === 0xff && bytes[at + 1] === 0xf8;
    if (isSync && bytes[at + 4] === offsets.length) offsets.push(at);
  }
  return offsets;
}

describe('a FLAC file with one byte changed, anywhere', () => {
  it('gives the same samples, those before a last block that is broken, or is refused', async () => {
    const sound = manyBlocks();
    const { samples } = await bring(sound, { layout: null });
    let refused = 0;
    // Each place of the stream info, then every 97th up to the end.
    const places = Array.from({ length: sound.length }, (_, at) => at).filter(
      (at) => at < 42 || at % 97 === 0,
    );
    for (const at of places) {
      const bytes = sound.slice();
      bytes[at]! ^= 0x24;
      const outcome = await bring(bytes, { layout: null }).catch((error: Error) => error);
      if (outcome instanceof Error) {
        expect([at, outcome.name]).toEqual([at, 'RefusedFileError']);
        refused++;
      } else {
        const { frames, sampleRateHz, warnings } = outcome.format;
        const isCut = frames === 4 * 480 && warnings.length === 1;
        const expected = isCut ? samples.map((channel) => channel.subarray(0, frames)) : samples;
        expect([at, sampleRateHz, outcome.samples]).toEqual([at, 96_000, expected]);
      }
    }
    expect(refused).toBeGreaterThan(places.length / 4);
  }, 60_000);
});
