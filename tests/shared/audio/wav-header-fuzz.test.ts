import { describe, expect, it } from 'vitest';
import { personalMetadata } from '../../../shared/audio/personal-metadata.ts';
import { asciiBytes } from '../../../shared/audio/wav-envelope.ts';
import { readWavHeader } from '../../../shared/audio/wav-header.ts';
import { readWavMetadata } from '../../../shared/audio/wav-metadata.ts';
import { RefusedFileError, type FileRefusal } from '../../../shared/audio/refused-file-error.ts';
import { countingSource, type CountingSource } from '../../support/wav/counting-source.ts';
import { wavMutator } from '../../support/wav/mutate-wav.ts';

/** `npm run fuzz` asks for a hundred thousand. */
const mutants = Number(process.env.RECALESCE_FUZZ_MUTANTS ?? 5000);
/** Times are held against a bound only where nothing else runs beside. */
const isLongRun = mutants > 5000;
const longestMs = 10 * 60_000;
const windowBytes = 4096;

type Outcome = 'accepted' | FileRefusal;

async function outcomeOf(source: CountingSource): Promise<Outcome> {
  try {
    const header = await readWavHeader(source);
    personalMetadata(readWavMetadata(header.metadata));
    expect(header.dataOffset + header.dataBytes).toBeLessThanOrEqual(source.sizeBytes);
    expect(header.dataBytes).toBe(header.format.frames * header.blockAlign);
    expect(header.format.frames).toBeGreaterThan(0);
    return 'accepted';
  } catch (error) {
    expect(error).toBeInstanceOf(RefusedFileError);
    return (error as RefusedFileError).code;
  }
}

/** At most three reads for each chunk head that fits into the file, none longer than the file or a window. */
function expectLittleRead(source: CountingSource): void {
  expect(source.reads()).toBeLessThanOrEqual(3 * (source.sizeBytes / 8) + 3);
  expect(source.largestRead()).toBeLessThanOrEqual(Math.max(windowBytes, source.sizeBytes));
}

describe('broken and hostile headers', () => {
  it(
    `each of ${mutants} mutants ends in a header or in a refusal, soon, and reads nothing outside the file`,
    async () => {
      const next = wavMutator(20261);
      const met = new Map<Outcome, number>();
      let [slowestMs, mostBytesRead] = [0, 0];
      for (let i = 0; i < mutants; i++) {
        const source = countingSource(next());
        const fromMs = performance.now();
        const outcome = await outcomeOf(source);
        slowestMs = Math.max(slowestMs, performance.now() - fromMs);
        mostBytesRead = Math.max(mostBytesRead, source.bytesRead());
        met.set(outcome, (met.get(outcome) ?? 0) + 1);
        expectLittleRead(source);
      }
      expect(mostBytesRead).toBeLessThan(1_000_000);
      // All ends must be met, or the mutations test nothing.
      expect(met.get('accepted')).toBeGreaterThan(mutants / 10);
      const seldom: FileRefusal[] = [
        'compressed',
        'width',
        'channels',
        'rate',
        'block-align',
        'broken-format',
      ];
      for (const code of [...seldom, 'no-format', 'no-data', 'no-frames', 'unknown'] as const) {
        expect(met.get(code) ?? 0, code).toBeGreaterThan(0);
      }
      if (isLongRun) {
        expect(slowestMs).toBeLessThan(1000);
        const figures = { mutants, slowestMs, mostBytesRead, ...Object.fromEntries(met) };
        process.stdout.write(`${JSON.stringify(figures)}\n`);
      }
    },
    longestMs,
  );

  it('a file of zeros that claims terabytes is refused at once', async () => {
    const source = countingSource(asciiBytes('RIFF\0\0\0\0WAVE'), 5e12);
    await expect(readWavHeader(source)).rejects.toBeInstanceOf(RefusedFileError);
    expect(source.bytesRead()).toBeLessThan(20_000);
  });

  it('a file of a million empty chunks is left after ten thousand', async () => {
    const bytes = new Uint8Array(12 + 8 * 1_000_000);
    bytes.set(asciiBytes('RIFF\0\0\0\0WAVE'));
    for (let at = 12; at < bytes.length; at += 8) bytes.set([0x61, 0x62, 0x63, 0x64], at);
    const source = countingSource(bytes);
    await expect(readWavHeader(source)).rejects.toMatchObject({ code: 'too-many-chunks' });
    expect(source.bytesRead()).toBeLessThan(200_000);
  });
});
