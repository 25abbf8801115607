import { describe, expect, it } from 'vitest';
import type { QualityFinding } from '../../../shared/contract/measurement.ts';
import { ChannelPairs, joinChannelPairs } from '../../../server/signal/channel-pairs.ts';
import { DropoutTracker, joinDropouts } from '../../../server/signal/dropouts.ts';
import { joinLevels, LevelTracker } from '../../../server/signal/levels.ts';
import { qualityFindings } from '../../../server/signal/quality.ts';
import { forEachCell } from '../../../server/signal/sample-cells.ts';
import { mix, sine, whiteNoiseSignal } from '../../support/wav/signals.ts';
import { mainsLinesOf } from './mains-lines.ts';

const STEP = 2 ** -15;

function findingsOf(
  channels: Float32Array[],
  sampleRateHz = 48_000,
  warnings: string[] = [],
): QualityFinding[] {
  const frames = channels[0]!.length;
  const pairs = new ChannelPairs(channels.length);
  pairs.push(channels, 0, frames);
  return qualityFindings({
    sampleRateHz,
    frames,
    stepSize: STEP,
    pairs: joinChannelPairs([pairs.finish()]),
    headerWarnings: warnings,
    channels: channels.map((samples, channel) => {
      const levels = new LevelTracker(1 - STEP, { startSample: 0, endSample: frames });
      forEachCell(samples, { from: 0, to: frames, startSample: 0 }, (cell, start) => {
        levels.push(cell, samples, start, start);
      });
      return {
        ...joinLevels(channel, [levels.finish()], 0),
        dropouts: dropoutsOf(samples, frames, sampleRateHz),
        mains: mainsLinesOf(samples, sampleRateHz),
      };
    }),
  });
}

function dropoutsOf(
  samples: Float32Array,
  blockFrames: number,
  sampleRateHz = 48_000,
  ends = [samples.length],
) {
  const parts = ends.map((end, index) => {
    const tracker = new DropoutTracker({ sampleRateHz, stepSize: STEP, fullScale: 1 - STEP });
    const window = { samples, startSample: 0, endSample: samples.length };
    for (let from = ends[index - 1] ?? 0; from < end; from += blockFrames) {
      tracker.push(window, from, Math.min(from + blockFrames, end));
    }
    return tracker.finish(window, end);
  });
  return joinDropouts(parts, sampleRateHz);
}

function codesOf(findings: QualityFinding[]): string[] {
  return findings.map((finding) => finding.code);
}

describe('quality findings', () => {
  it('are none for noise that only sounds', () => {
    expect(findingsOf([whiteNoiseSignal(200_000, 0.05, 1)])).toEqual([]);
  });

  it('name clipping with its places', () => {
    const loud = sine(48_000, 100, 48_000, 2).map((x) => Math.max(-1, Math.min(1, x)));
    const [found] = findingsOf([loud]);
    expect(found).toMatchObject({ code: 'clipping', weight: 'serious', count: 200 });
    expect(found!.places).toHaveLength(50);
    expect(found!.sentence).toMatch(/lower bounds/);
  });

  it('name an offset', () => {
    const [found] = findingsOf([whiteNoiseSignal(48_000, 0.05, 2).map((x) => x + 0.1)]);
    expect(found).toMatchObject({ code: 'dc', weight: 'caution' });
    expect(found!.sentence).toContain('10 % of full scale');
  });

  it('name a silent channel and not its equality with another silent one', () => {
    const silent = [whiteNoiseSignal(48_000, 0.1, 3), new Float32Array(48_000), new Float32Array(48_000)];
    expect(codesOf(findingsOf(silent))).toEqual(['channel-silent', 'channel-silent']);
  });

  it('name equal and inverted channels', () => {
    const noise = whiteNoiseSignal(48_000, 0.1, 4);
    const found = findingsOf([noise, noise.slice(), noise.map((x) => -x)]);
    expect(found.map((finding) => finding.sentence)).toEqual([
      'Channels 0 and 1 carry the same samples.',
      'Channels 0 and 2 carry the same samples with opposite sign.',
      'Channels 1 and 2 carry the same samples with opposite sign.',
    ]);
  });

  it('pass on what the header said', () => {
    const warnings = ['The file is cut short: 5 kB of audio are missing.', 'The list chunk is odd.'];
    expect(codesOf(findingsOf([whiteNoiseSignal(48_000, 0.1, 5)], 48_000, warnings))).toEqual([
      'truncated',
      'header',
    ]);
  });
});

describe('drop-outs', () => {
  const noise = whiteNoiseSignal(48_000, 0.1, 6);

  it.each([48_000, 1000, 17])(
    'are gaps of 1 ms or more that cut into the signal, read in blocks of %d',
    (blockFrames) => {
      const cut = noise.slice();
      cut.fill(0, 10_000, 10_200);
      cut.fill(0.125, 20_000, 20_048);
      cut.fill(0, 30_000, 30_040);
      expect(dropoutsOf(cut, blockFrames).spans).toEqual([
        { startSample: 10_000, endSample: 10_200 },
        { startSample: 20_000, endSample: 20_048 },
      ]);
    },
  );

  it('are followed from one block into the next, and through whole blocks', () => {
    const cut = noise.slice();
    cut.fill(0, 990, 1040);
    cut.fill(0, 4980, 5000);
    cut.fill(0.01, 9952, 10_000);
    cut.fill(0.02, 20_500, 23_500);
    expect(dropoutsOf(cut, 1000).spans).toEqual([
      { startSample: 990, endSample: 1040 },
      { startSample: 9952, endSample: 10_000 },
      { startSample: 20_500, endSample: 23_500 },
    ]);
  });

  it('are not silence at either end, nor what a signal fades into, nor clipping', () => {
    const fading = noise.map((x, n) =>
      n < 24_000 ? Math.round(x * Math.exp(-n / 1500) * 32768) / 32768 : x,
    );
    fading.fill(0, 0, 100);
    fading.fill(0, 47_000);
    fading.fill(1, 40_000, 40_100);
    expect(dropoutsOf(fading, 48_000).count).toBe(0);
  });
});

describe('mains lines', () => {
  it('are found at 50 Hz and its multiples with their levels', () => {
    const hum = mix(
      sine(960_000, 50, 192_000, 0.01),
      sine(960_000, 150, 192_000, 0.003),
      whiteNoiseSignal(960_000, 0.01, 7),
    );
    const lines = mainsLinesOf(hum, 192_000);
    expect(lines.map((line) => line.frequencyHz)).toEqual([50, 150]);
    expect(Math.abs(lines[0]!.levelDb + 40)).toBeLessThan(1.5);
  });

  it('are found at 60 Hz in a file of 44.1 kHz whose mains is off by 0.1 Hz', () => {
    const hum = mix(
      sine(441_000, 60.1, 44_100, 0.01),
      sine(441_000, 120.2, 44_100, 0.01),
      whiteNoiseSignal(441_000, 0.01, 8),
    );
    expect(mainsLinesOf(hum, 44_100).map((line) => line.frequencyHz)).toEqual([60, 120]);
  });

  it('are none in noise, and none in less than a second', () => {
    for (const frames of [100_000, 20_000, 5_000_000]) {
      const noise = whiteNoiseSignal(frames, 0.1, frames);
      expect(mainsLinesOf(noise, 48_000)).toEqual([]);
    }
  });
});
