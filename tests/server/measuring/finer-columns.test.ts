import { describe, expect, it } from 'vitest';
import { decodeTile } from '../../../shared/audio/tile.ts';
import { tileLayout } from '../../../server/measuring/view-layout.ts';
import { NoSuchViewError, readTile, type ViewSource } from '../../../server/measuring/view-reader.ts';
import { mix, sine, whiteNoiseSignal } from '../../support/wav/signals.ts';
import type { WriteWavInput } from '../../support/wav/write-wav.ts';
import { measured } from './measured.ts';

const RATE_HZ = 192_000;

async function tileOf(source: ViewSource, band: 'audible' | 'ultrasonic', level: number, tile: number) {
  return decodeTile(await readTile({ ...source, channel: 0, band, level, tile }));
}

/** dB of one line by the sum that defines it: mean removed, periodic Hann, |2 X / sum(w)|^2. */
function directLevel(frame: Float32Array, hz: number): number {
  const mean = frame.reduce((sum, x) => sum + x, 0) / frame.length;
  let [re, im, sum] = [0, 0, 0];
  for (const [n, x] of frame.entries()) {
    const weight = 0.5 - 0.5 * Math.cos((2 * Math.PI * n) / frame.length);
    re += weight * (x - mean) * Math.cos((2 * Math.PI * hz * n) / RATE_HZ);
    im += weight * (x - mean) * Math.sin((2 * Math.PI * hz * n) / RATE_HZ);
    sum += weight;
  }
  return 10 * Math.log10((4 * (re * re + im * im)) / (sum * sum));
}

describe('levels finer than the kept ones', () => {
  const frames = 100_003;
  const samples = mix(whiteNoiseSignal(frames, 0.01, 7), sine(frames, 61_000, RATE_HZ, 0.1));
  const wav: WriteWavInput = {
    sampleRateHz: RATE_HZ,
    encoding: 'float',
    bitsPerSample: 32,
    channels: [samples],
  };

  it('are what a direct computation gives for the frame that they say, at both ends and between', async () => {
    const { source, summary } = await measured(wav);
    for (const picture of tileLayout(summary.format).pictures) {
      const binHz = (picture.highHz - picture.lowHz) / picture.bins;
      for (let level = -1; level >= -picture.finerLevels; level--) {
        const hop = picture.samplesPerColumn * 4 ** level;
        const frame = picture.frameSamples * 2 ** level;
        const last = Math.ceil((picture.columns * 4 ** -level) / 256) - 1;
        for (const tile of [0, Math.floor(last / 3), last]) {
          const made = await tileOf(source, picture.band, level, tile);
          expect(made).toMatchObject({ samplesPerColumn: hop, startSample: tile * 256 * hop });
          for (const column of [0, Math.min(101, made.columns - 1), made.columns - 1]) {
            const centred = (tile * 256 + column) * hop + Math.floor(hop / 2) - frame / 2;
            const from = Math.max(0, Math.min(centred, frames - frame));
            for (const bin of [0, 17, made.bins - 1]) {
              const hz = picture.lowHz + (bin + 0.5) * binHz;
              const wanted = directLevel(samples.subarray(from, from + frame), hz);
              const shownDb = made.codes[column * made.bins + bin]! * made.dbPerCode + made.minimumDb;
              expect(Math.abs(shownDb - wanted)).toBeLessThan(0.3);
            }
          }
        }
      }
    }
  });

  it('part two clicks of a few samples that the frames of level 0 join', async () => {
    const pair = whiteNoiseSignal(20_000, 1e-4, 3);
    for (const at of [10_000, 10_060]) pair.set(sine(4, 48_000, RATE_HZ, 0.5), at);
    const { source } = await measured({ ...wav, channels: [pair] });
    const levelAt = async (level: number, sample: number) => {
      const columnSamples = 128 * 4 ** level;
      const column = Math.floor(sample / columnSamples);
      const tile = await tileOf(source, 'ultrasonic', level, Math.floor(column / 256));
      const codes = tile.codes.subarray((column % 256) * tile.bins, ((column % 256) + 1) * tile.bins);
      return Math.max(...codes) / 2 - 120;
    };
    const between = async (level: number) => (await levelAt(level, 10_002)) - (await levelAt(level, 10_032));
    expect(await between(0)).toBeLessThan(3);
    expect(await between(-3)).toBeGreaterThan(30);
  });

  it('end where frames would be too short, and are the same in a recording shorter than one frame', async () => {
    const { source, summary } = await measured({ ...wav, channels: [samples.slice(0, 100)] });
    const [audible, ultrasonic] = tileLayout(summary.format).pictures;
    expect([audible?.finerLevels, ultrasonic?.finerLevels]).toEqual([3, 3]);
    expect((await tileOf(source, 'ultrasonic', -3, 0)).columns).toBe(64);
    await expect(tileOf(source, 'ultrasonic', -4, 0)).rejects.toThrow(NoSuchViewError);
    await expect(tileOf(source, 'ultrasonic', -1, 1)).rejects.toThrow(NoSuchViewError);
  });

  it('reach one sample per column where frames are longer', async () => {
    const { summary } = await measured({
      ...wav,
      sampleRateHz: 1_000_000,
      channels: [samples.slice(0, 9000)],
    });
    const ultrasonic = tileLayout(summary.format).pictures.find(({ band }) => band === 'ultrasonic')!;
    expect(ultrasonic.samplesPerColumn * 4 ** -ultrasonic.finerLevels).toBe(1);
  });
});
