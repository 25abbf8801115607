import { describe, expect, it } from 'vitest';
import { quietCodes, stretchesOf } from '../../../server/measuring/quiet-levels.ts';
import { readQuietLevels } from '../../../server/measuring/view-reader.ts';
import { tileLayout } from '../../../server/measuring/view-layout.ts';
import { mix, sine, whiteNoiseSignal } from '../../support/wav/signals.ts';
import { measured } from './measured.ts';

describe('what is quiet in a picture', () => {
  it('is the median of each bin over the quieter half of the columns', () => {
    const columns = [
      [10, 50],
      [11, 52],
      [200, 210],
      [12, 51],
      [190, 220],
      [205, 205],
    ];
    const parts = [Uint8Array.from(columns.slice(0, 2).flat()), Uint8Array.from(columns.slice(2).flat())];
    expect(quietCodes(parts, 2)).toEqual([11, 51]);
    expect(quietCodes([Uint8Array.from([7, 9])], 2)).toEqual([7, 9]);
  });

  it('is looked for from the first column to the last', () => {
    expect(stretchesOf(100, 3)).toEqual([{ firstColumn: 0, columns: 100 }]);
    const many = stretchesOf(10_000, 0);
    expect(many[0]?.firstColumn).toBe(0);
    expect(many.at(-1)!.firstColumn + many.at(-1)!.columns).toBe(10_000);
    expect(many.reduce((sum, { columns }) => sum + columns, 0)).toBe(256);
  });

  it('holds a hum and no click, at every level of both pictures', async () => {
    const rateHz = 192_000;
    const samples = mix(whiteNoiseSignal(900_000, 1e-3, 2), sine(900_000, 40_000, rateHz, 0.05));
    for (let at = 5000; at < samples.length - 500; at += 90_000)
      samples.set(sine(400, 70_000, rateHz, 0.5), at);
    const wav = { sampleRateHz: rateHz, bitsPerSample: 24, channels: [new Float32Array(900_000), samples] };
    const { source, summary } = await measured(wav);
    const { pictures } = await readQuietLevels(source, 1);
    for (const picture of tileLayout(summary.format).pictures) {
      const quiet = pictures.find(({ band }) => band === picture.band)!;
      expect(quiet.levels.map(({ level }) => level)).toEqual(
        Array.from({ length: picture.levels + picture.finerLevels }, (_, n) => n - picture.finerLevels),
      );
      expect(quiet.levels.every(({ codes }) => codes.length === picture.bins)).toBe(true);
      if (picture.band !== 'ultrasonic') continue;
      const binOf = (hz: number) =>
        Math.floor(((hz - picture.lowHz) / (picture.highHz - picture.lowHz)) * picture.bins);
      for (const { level, codes } of quiet.levels.filter((one) => one.level <= 4)) {
        expect(codes[binOf(40_000)]! / 2 - 120, `hum at level ${level}`).toBeGreaterThan(-30);
        expect(codes[binOf(70_000)]! / 2 - 120, `no click at level ${level}`).toBeLessThan(-50);
      }
    }
  });
});
