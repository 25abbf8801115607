import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import type { SampleLayout } from '../../../shared/audio/audio-format.ts';
import { decodeFrames } from '../../../shared/audio/pcm-decode.ts';
import { kernelEngine } from '../../../server/kernel/kernel-engine.ts';

const layouts: [SampleLayout['encoding'], number][] = [
  ['integer', 8],
  ['integer', 16],
  ['integer', 24],
  ['integer', 32],
  ['float', 32],
  ['float', 64],
];

describe.each(layouts)('%s samples of %d bits', (encoding, bitsPerSample) => {
  it.each([1, 2, 5])('in %d channels come out as the other decoder gives them, bit by bit', (channels) => {
    const layout = { encoding, bitsPerSample, channels };
    const engine = kernelEngine();
    const decode = engine.decoder(layout, 400);
    const own = Array.from({ length: channels }, () => engine.samples(400));
    fc.assert(
      fc.property(fc.uint8Array({ maxLength: 400, size: 'max' }), fc.boolean(), (bytes, isOwn) => {
        const wanted = Array.from({ length: channels }, () => new Float32Array(400).fill(9));
        const found = isOwn
          ? own.map(({ values }) => values.fill(9))
          : wanted.map(() => new Float32Array(400).fill(9));
        expect(decode(bytes, found)).toEqual(decodeFrames(bytes, layout, wanted));
        for (const [channel, { buffer, byteOffset, byteLength }] of found.entries()) {
          const bits = Buffer.from(buffer, byteOffset, byteLength);
          expect(bits.equals(Buffer.from(wanted[channel]!.buffer))).toBe(true);
        }
      }),
    );
  });

  it('read the lowest and the highest code, and those beside zero', () => {
    const decode = kernelEngine().decoder({ encoding, bitsPerSample, channels: 1 }, 64);
    const bytes = Uint8Array.from({ length: 64 }, (_, i) => [0, 128, 255, 127, 1][(i * 7) % 5]!);
    const [found, wanted] = [new Float32Array(64), new Float32Array(64)];
    decode(bytes, [found]);
    decodeFrames(bytes, { encoding, bitsPerSample, channels: 1 }, [wanted]);
    expect(found).toEqual(wanted);
  });
});

describe('a decoder', () => {
  it('counts what is not finite in each channel and stores 0', () => {
    const values = Float32Array.of(1, Number.NaN, 0.5, Infinity, -0.25, -Infinity, 0, 0.125);
    const decode = kernelEngine().decoder({ encoding: 'float', bitsPerSample: 32, channels: 2 }, 32);
    const out = [new Float32Array(4), new Float32Array(4)];
    expect(decode(new Uint8Array(values.buffer), out).nonFiniteSamples).toEqual([0, 3]);
    expect(out.map((samples) => [...samples])).toEqual([
      [1, 0.5, -0.25, 0],
      [0, 0, 0, 0.125],
    ]);
  });

  it('counts a double that is too large for a float', () => {
    const decode = kernelEngine().decoder({ encoding: 'float', bitsPerSample: 64, channels: 1 }, 16);
    const out = [new Float32Array(2)];
    expect(decode(new Uint8Array(Float64Array.of(1e300, 0.5).buffer), out).nonFiniteSamples).toEqual([1]);
    expect([...out[0]!]).toEqual([0, 0.5]);
  });

  it('refuses other widths, too many bytes, and too little room', () => {
    const engine = kernelEngine();
    const layout = { encoding: 'integer', bitsPerSample: 16, channels: 2 } as const;
    expect(() => engine.decoder({ ...layout, bitsPerSample: 20 }, 8)).toThrow(RangeError);
    const decode = engine.decoder(layout, 8);
    expect(() => decode(new Uint8Array(12), [new Float32Array(3), new Float32Array(3)])).toThrow(RangeError);
    expect(() => decode(new Uint8Array(8), [new Float32Array(2), new Float32Array(1)])).toThrow(RangeError);
    expect(() => decode(new Uint8Array(8), [new Float32Array(2)])).toThrow(RangeError);
  });
});
