import { describe, expect, it } from 'vitest';
import { infoChunk } from '../../../server/setup/demo-audio/metadata-chunks.ts';
import { seededRandom, type Random } from '../../../server/setup/demo-audio/seeded-random.ts';
import { concatBytes } from '../../../shared/audio/wav-envelope.ts';
import { personalMetadata } from '../../../shared/audio/personal-metadata.ts';
import { readWavHeader } from '../../../shared/audio/wav-header.ts';
import { readWavMetadata } from '../../../shared/audio/wav-metadata.ts';
import { WavRefusedError } from '../../../shared/audio/wav-refused-error.ts';
import { countingSource } from '../../support/wav/counting-source.ts';
import { writeWav } from '../../support/wav/write-wav.ts';

const MUTANTS = 5000;
/** 10,000 chunk heads through windows of 4 KiB, and 4 MiB of text: far above what small files can reach. */
const MOST_READ_BYTES = 1_000_000;

function seedFiles(): Uint8Array[] {
  const extraChunks = [
    infoChunk({ ISFT: 'recorder 1', IART: 'somebody' }),
    { id: 'bext', body: new Uint8Array(603).fill(0x41) },
    { id: 'iXML', body: new TextEncoder().encode('<BWFXML><USER>somebody</USER></BWFXML>') },
  ];
  const containers = ['RIFF', 'RF64', 'BW64'] as const;
  return containers.map((container, i) =>
    writeWav({
      sampleRateHz: 192_000,
      channels: [new Float32Array(30), new Float32Array(30)],
      bitsPerSample: 24,
      container,
      extensible: i > 0,
      extraChunks,
    }),
  );
}

/** Numbers that have broken parsers before. */
const EDGES = [
  0, 1, 2, 3, 7, 8, 0x7f, 0x80, 0xff, 0x7fff, 0xffff, 0x7fffffff, 0x80000000, 0xfffffffe, 0xffffffff,
];

function mutate(bytes: Uint8Array, random: Random): Uint8Array {
  const pick = (below: number): number => Math.floor(random() * below);
  let mutant = bytes.slice();
  for (let change = 0; change <= pick(4); change++) {
    const at = pick(Math.max(1, mutant.length - 4));
    const kind = pick(5);
    if (kind === 0) mutant[at] = pick(256);
    else if (kind === 1 && mutant.length >= 4)
      new DataView(mutant.buffer).setUint32(at, EDGES[pick(EDGES.length)]!, true);
    else if (kind === 2) mutant = mutant.slice(0, at);
    else if (kind === 3) mutant = concatBytes([mutant.subarray(0, at), mutant.subarray(at + 1 + pick(9))]);
    else mutant = concatBytes([mutant.subarray(0, at), mutant.subarray(Math.max(0, at - pick(40)))]);
  }
  return mutant;
}

describe('broken and hostile headers', () => {
  it('every mutant ends in a header or in a refusal, reads little and nothing outside the file', async () => {
    const random = seededRandom(20261);
    const seeds = seedFiles();
    let [accepted, refused] = [0, 0];
    for (let i = 0; i < MUTANTS; i++) {
      const source = countingSource(mutate(seeds[i % seeds.length]!, random));
      try {
        const header = await readWavHeader(source);
        personalMetadata(readWavMetadata(header.metadata));
        expect(header.dataOffset + header.dataBytes).toBeLessThanOrEqual(source.sizeBytes);
        expect(header.dataBytes).toBe(header.format.frames * header.blockAlign);
        expect(header.format.frames).toBeGreaterThan(0);
        accepted++;
      } catch (error) {
        expect(error).toBeInstanceOf(WavRefusedError);
        refused++;
      }
      expect(source.bytesRead()).toBeLessThan(MOST_READ_BYTES);
    }
    // Both ends must be met, or the mutations test nothing.
    expect(accepted).toBeGreaterThan(MUTANTS / 20);
    expect(refused).toBeGreaterThan(MUTANTS / 20);
  });

  it('a file of zeros that claims terabytes is refused at once', async () => {
    const head = seedFiles()[0]!.subarray(0, 12);
    const source = countingSource(head, 5e12);
    await expect(readWavHeader(source)).rejects.toBeInstanceOf(WavRefusedError);
    expect(source.bytesRead()).toBeLessThan(20_000);
  });
});
