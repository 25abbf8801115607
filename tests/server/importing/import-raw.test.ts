import { describe, expect, it } from 'vitest';
import { toWavOrder } from '../../../server/importing/import-raw.ts';
import type { RawLayout } from '../../../shared/audio/declared-layout.ts';
import { liesLikeWav, rawFileFacts } from '../../../shared/audio/raw-file.ts';
import { importFolder } from './imported.ts';

const { bring } = importFolder();

function layoutOf(facts: Partial<RawLayout>): RawLayout {
  return {
    kind: 'raw',
    encoding: 'signed',
    bitsPerSample: 16,
    byteOrder: 'little',
    channels: 1,
    sampleRateHz: 250_000,
    headerBytes: 0,
    ...facts,
  };
}

/** Writes numbers with the language's own methods, not with ours. */
function written(
  facts: Pick<RawLayout, 'encoding' | 'bitsPerSample' | 'byteOrder'>,
  values: number[],
): Uint8Array {
  const { encoding, bitsPerSample, byteOrder } = facts;
  const width = bitsPerSample / 8;
  const buffer = Buffer.alloc(values.length * width);
  const end = byteOrder === 'big' ? 'BE' : 'LE';
  for (const [n, value] of values.entries()) {
    const at = n * width;
    if (encoding === 'float') buffer[`write${width === 4 ? 'Float' : 'Double'}${end}`](value, at);
    else if (encoding === 'signed') buffer[`writeInt${end}`](value, at, width);
    else buffer[`writeUInt${end}`](value + 2 ** (bitsPerSample - 1), at, width);
  }
  return new Uint8Array(buffer);
}

const integerLayouts = (['signed', 'unsigned'] as const).flatMap((encoding) =>
  [8, 16, 24, 32].flatMap((bitsPerSample) =>
    (['little', 'big'] as const).map((byteOrder) => ({ encoding, bitsPerSample, byteOrder })),
  ),
);
const floatLayouts = [32, 64].flatMap((bitsPerSample) =>
  (['little', 'big'] as const).map((byteOrder) => ({ encoding: 'float' as const, bitsPerSample, byteOrder })),
);

describe('raw samples', () => {
  it.each(integerLayouts)(
    '$encoding, $bitsPerSample bits, $byteOrder end first, come out as they were',
    async (facts) => {
      const top = 2 ** (facts.bitsPerSample - 1);
      const codes = [0, 1, -1, top - 1, -top, 77, -100];
      const { samples, wav, format } = await bring(written(facts, codes), { layout: layoutOf(facts) });
      expect([...samples[0]!]).toEqual(codes.map((code) => Math.fround(code / top)));
      expect(wav.format).toMatchObject({ bitsPerSample: facts.bitsPerSample, encoding: 'integer' });
      expect(format).toMatchObject({ container: 'raw', frames: 7, sampleRateHz: 250_000 });
    },
  );

  it.each(floatLayouts)('$encoding, $bitsPerSample bits, $byteOrder end first', async (facts) => {
    const values = [0, 0.5, -1.25, 1 / 3, 2 ** -40];
    const { samples } = await bring(written(facts, values), { layout: layoutOf(facts) });
    expect([...samples[0]!]).toEqual(values.map(Math.fround));
  });

  it('channels are taken apart, and a header is passed over', async () => {
    const data = written({ encoding: 'signed', bitsPerSample: 24, byteOrder: 'big' }, [1, -1, 2, -2, 3, -3]);
    const bytes = Buffer.concat([Buffer.from('made by somebody'), data]);
    const layout = layoutOf({ bitsPerSample: 24, byteOrder: 'big', channels: 2, headerBytes: 16 });
    const { samples } = await bring(bytes, { layout });
    expect(samples.map((channel) => [...channel].map((sample) => sample * 2 ** 23))).toEqual([
      [1, 2, 3],
      [-1, -2, -3],
    ]);
  });

  it('of a length that no piece of reading divides come out whole', async () => {
    const codes = Array.from({ length: 800_001 }, (_, n) => (n % 60_000) - 30_000);
    const facts = { encoding: 'unsigned', bitsPerSample: 24, byteOrder: 'big' } as const;
    const { samples } = await bring(written(facts, codes), { layout: layoutOf(facts) });
    expect(samples[0]!.every((sample, n) => sample * 2 ** 23 === codes[n])).toBe(true);
  });

  it('that lie like those of WAV need no copy, and turning them changes nothing', () => {
    for (const facts of [...integerLayouts, ...floatLayouts]) {
      const bytes = Uint8Array.from({ length: 24 }, (_, n) => n * 11);
      const isSame = Buffer.compare(toWavOrder(bytes.slice(), layoutOf(facts)), bytes) === 0;
      expect([facts, isSame]).toEqual([facts, liesLikeWav(layoutOf(facts))]);
    }
  });
});

describe('a layout that does not fit the file', () => {
  it('is told with what is left over', () => {
    expect(() => rawFileFacts(1003, layoutOf({ channels: 2 }))).toThrow(
      'The file has 1,003 bytes behind the 0 that are passed over. They are no whole number of frames of 4 bytes: 3 are left over.',
    );
  });

  it('is told where the header is longer than the file', () => {
    expect(() => rawFileFacts(100, layoutOf({ headerBytes: 512 }))).toThrow(
      'The file has 100 bytes, and with 512 passed over not a single frame of 2 bytes is left.',
    );
  });
});
