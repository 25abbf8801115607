import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { encodeFrames } from '../../../server/setup/demo-audio/encode-frames.ts';
import { bytesPerFrame, type SampleLayout } from '../../../shared/audio/audio-format.ts';
import { decodeFrames, zeroNonFinite } from '../../../shared/audio/pcm-decode.ts';
import { decodeWithWavDecoder } from '../../../server/measuring/small-recording.ts';

const WIDTHS = [
  { encoding: 'integer', bitsPerSample: 8 },
  { encoding: 'integer', bitsPerSample: 16 },
  { encoding: 'integer', bitsPerSample: 24 },
  { encoding: 'integer', bitsPerSample: 32 },
  { encoding: 'float', bitsPerSample: 32 },
  { encoding: 'float', bitsPerSample: 64 },
] as const;

function decoded(bytes: Uint8Array, layout: SampleLayout): Float32Array[] {
  const frames = Math.floor(bytes.length / bytesPerFrame(layout));
  const out = Array.from({ length: layout.channels }, () => new Float32Array(frames));
  expect(decodeFrames(bytes, layout, out).frames).toBe(frames);
  return out;
}

/** What wav-decoder 1.3.0 makes of the same block, with what is not finite put to 0. */
function reference(bytes: Uint8Array, layout: SampleLayout): Float32Array[] {
  const channels = decodeWithWavDecoder(bytes, layout);
  for (const samples of channels) zeroNonFinite(samples, samples.length);
  return channels;
}

describe('decoding a block of frames', () => {
  for (const width of WIDTHS) {
    it(`${width.encoding} samples of ${width.bitsPerSample} bits come out as wav-decoder gives them`, () => {
      const block = fc.record({
        channels: fc.integer({ min: 1, max: 5 }),
        bytes: fc.uint8Array({ minLength: 1, maxLength: 400 }),
      });
      fc.assert(
        fc.property(block, ({ channels, bytes }) => {
          const layout = { ...width, channels };
          expect(decoded(bytes, layout)).toEqual(reference(bytes, layout));
        }),
        { numRuns: 200, seed: 11 },
      );
    });
  }

  it.each([
    ['8-bit', 8, [0, 128, 255], [-1, 0, 127 / 128]],
    ['16-bit', 16, [0x00, 0x80, 0x00, 0x00, 0xff, 0x7f], [-1, 0, 32767 / 32768]],
    ['24-bit', 24, [0, 0, 0x80, 0, 0, 0, 0xff, 0xff, 0x7f], [-1, 0, 8388607 / 8388608]],
    ['32-bit', 32, [0, 0, 0, 0x80, 0, 0, 0, 0, 0, 0, 0, 0x40], [-1, 0, 0.5]],
  ])(
    'the extremes and the zero of %s integers lie where they should',
    (_, bitsPerSample, bytes, expected) => {
      const layout: SampleLayout = { encoding: 'integer', bitsPerSample, channels: 1 };
      expect([...decoded(Uint8Array.from(bytes), layout)[0]!]).toEqual(expected);
    },
  );

  it('samples that are not finite are stored as 0 and counted by channel', () => {
    const layout: SampleLayout = { encoding: 'float', bitsPerSample: 64, channels: 2 };
    const values = [Number.NaN, 0.5, Infinity, -0.5, 1e300, 1, 0.25, -Infinity];
    const bytes = new Uint8Array(Float64Array.from(values).buffer);
    const out = [new Float32Array(4), new Float32Array(4)];
    // 1e300 is finite but too large for 32 bits.
    expect(decodeFrames(bytes, layout, out)).toEqual({ frames: 4, nonFiniteSamples: [3, 1] });
    expect(out.map((channel) => [...channel])).toEqual([
      [0, 0, 0, 0.25],
      [0.5, -0.5, 1, 0],
    ]);
  });

  it('a block that does not begin at the start of its buffer is read from where it begins', () => {
    const layout: SampleLayout = { encoding: 'integer', bitsPerSample: 16, channels: 1 };
    const bytes = Uint8Array.from([9, 0x00, 0x40, 0x00, 0xc0]).subarray(1);
    expect([...decoded(bytes, layout)[0]!]).toEqual([0.5, -0.5]);
  });

  it('an array too short for the block is an error, not a silent loss', () => {
    const layout: SampleLayout = { encoding: 'integer', bitsPerSample: 16, channels: 2 };
    expect(() => decodeFrames(new Uint8Array(8), layout, [new Float32Array(2), new Float32Array(1)])).toThrow(
      'out[1] holds 1 samples, the block has 2 frames',
    );
  });

  it('a width that no file has is an error', () => {
    const layout: SampleLayout = { encoding: 'integer', bitsPerSample: 12, channels: 2 };
    expect(() => decodeFrames(new Uint8Array(9), layout, [])).toThrow(RangeError);
  });

  it('what the encoder of the tests writes comes back within half a step', () => {
    const samples = Float32Array.from({ length: 50 }, (_, n) => Math.sin(n));
    for (const width of WIDTHS) {
      const layout = { ...width, channels: 2 };
      const back = decoded(encodeFrames([samples, samples.map((x) => -x)], layout), layout);
      const step = width.encoding === 'float' ? 0 : 0.5 / 2 ** (Math.min(24, width.bitsPerSample) - 1);
      samples.forEach((sample, n) => {
        // At full scale the positive side lacks one code.
        expect(Math.abs(back[0]![n]! - sample)).toBeLessThanOrEqual(2 * step);
        expect(Math.abs(back[1]![n]! + sample)).toBeLessThanOrEqual(2 * step);
      });
    }
  });
});
