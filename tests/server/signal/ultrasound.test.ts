import { describe, expect, it } from 'vitest';
import { observableBand } from '../../../server/signal/ultrasound-band.ts';
import { createUltrasoundTracker } from '../../../server/signal/ultrasound-tracker.ts';
import { CandidateTally, judgeUltrasound, ultrasonicEnergyShare } from '../../../server/signal/ultrasound.ts';
import { candidateAt } from './candidate-example.ts';
import { seededNormal, seededUniform } from './synthetic-clicks.ts';

const free = { sensorLowHz: null, sensorHighHz: null, floorEdgeHz: null };

describe('observable band', () => {
  it('reaches from 20 kHz to 0.45 of the rate where nothing else limits it', () => {
    expect(observableBand({ ...free, sampleRateHz: 192_000 })).toEqual({
      observable: true,
      lowHz: 20_000,
      highHz: 86_400,
    });
  });

  it('is cut by the sensor and by the edge of the floor', () => {
    const band = observableBand({
      sampleRateHz: 1_000_000,
      sensorLowHz: 50_000,
      sensorHighHz: 200_000,
      floorEdgeHz: 150_000,
    });
    expect(band).toEqual({ observable: true, lowHz: 50_000, highHz: 150_000 });
  });

  it('needs a third of an octave: 56 kHz is the least rate, and 25.2 kHz the least upper limit', () => {
    expect(observableBand({ ...free, sampleRateHz: 56_000 }).observable).toBe(true);
    expect(observableBand({ ...free, sampleRateHz: 55_900 }).observable).toBe(false);
    expect(observableBand({ ...free, sampleRateHz: 192_000, sensorHighHz: 25_000 }).observable).toBe(false);
  });

  it.each([
    [{ ...free, sampleRateHz: 48_000 }, /sample rate of 48 kHz/],
    [{ ...free, sampleRateHz: 192_000, sensorHighHz: 20_000 }, /sensor's band ends at 20 kHz/],
    [{ ...free, sampleRateHz: 192_000, floorEdgeHz: 16_000 }, /noise floor itself ends at 16 kHz/],
    [{ ...free, sampleRateHz: 192_000, sensorLowHz: 100_000 }, /sensor's band begins at 100 kHz/],
  ])('says in words what hides it', (limits, words) => {
    expect(observableBand(limits)).toMatchObject({ observable: false, reason: expect.stringMatching(words) });
  });
});

describe('flagged spans', () => {
  const options = {
    sampleRateHz: 192_000,
    channel: 1,
    frameSize: 256,
    hop: 128,
    frames: 3000 * 128,
    band: { lowHz: 20_000, highHz: 86_400 },
  };

  /** Frames of noise, those in `loud` raised by 10 dB. */
  function track(loud: (index: number) => boolean, count = 3000) {
    const uniform = seededUniform(2);
    const normal = seededNormal(uniform);
    const tracker = createUltrasoundTracker(options);
    for (let index = 0; index < count; index++) {
      const power = Float32Array.from(
        { length: 128 },
        () => 1e-6 * (normal() ** 2 + normal() ** 2) * (loud(index) ? 10 : 1),
      );
      tracker.push({ index, power, offset: 27, first: 27, end: 128 });
    }
    return tracker.finish();
  }

  it('steady noise has none', () => {
    expect(track(() => false)).toEqual({ spans: [], spanCount: 0 });
  });

  it('stand where the energy stands 6 dB and more over the floor, with how much', () => {
    const { spans, spanCount } = track((index) => index >= 1000 && index < 1010);
    expect(spanCount).toBe(1);
    expect(spans[0]).toMatchObject({ channel: 1, startSample: 128_000, endSample: 1010 * 128 });
    expect(spans[0]?.excessDb).toBeGreaterThan(9.5);
    expect(spans[0]?.excessDb).toBeLessThan(12);
  });

  it('are found in the first frames and in a recording too short to learn from', () => {
    expect(track((index) => index >= 5 && index < 8).spans[0]?.startSample).toBe(5 * 128);
    expect(track((index) => index === 20, 40).spans[0]?.startSample).toBe(20 * 128);
  });

  it('keep their floor while one lasts', () => {
    const { spans, spanCount } = track((index) => index >= 600 && index < 2600);
    expect(spanCount).toBe(1);
    expect(spans[0]).toMatchObject({ startSample: 600 * 128, endSample: 2600 * 128 });
  });

  it('are all counted and the strongest thousand kept', () => {
    const { spans, spanCount } = track((index) => index > 600 && index % 4 === 0, 8000);
    expect(spanCount).toBe(1849);
    expect(spans).toHaveLength(1000);
    expect(spans.every((span, at) => at === 0 || span.startSample > (spans[at - 1]?.startSample ?? 0))).toBe(
      true,
    );
  });
});

describe('verdict', () => {
  const band = { observable: true, lowHz: 20_000, highHz: 86_400 } as const;
  const quiet = {
    sampleRateHz: 192_000,
    sensorLowHz: null,
    band,
    energyShare: 0.001,
    expectedByChance: 0.02,
    tracked: [{ spans: [], spanCount: 0 }],
  };

  function tallyOf(...classes: ('below' | 'across' | 'above')[]): CandidateTally {
    const tally = new CandidateTally(null);
    classes.forEach((hearingClass, at) => {
      const ultrasonicShare = { below: 0.02, across: 0.5, above: 0.98 }[hearingClass];
      tally.add(
        candidateAt(192_000 * (at + 1), 0, { hearingClass, ultrasonicShare, peakFrequencyHz: 60_000 }),
      );
    });
    return tally;
  }

  it('is not found where nothing stands out, naming the band that was looked at', () => {
    const judged = judgeUltrasound({ ...quiet, tally: tallyOf('below', 'below') });
    expect(judged.verdict).toBe('not-found');
    expect(judged.reason).toContain('20 kHz to 86.4 kHz');
    expect(judged.candidates).toEqual({ total: 2, below: 2, across: 0, above: 0, expectedByChance: 0.02 });
  });

  it('is found with candidates, saying how many, where, how strong and at what frequency', () => {
    const judged = judgeUltrasound({ ...quiet, tally: tallyOf('below', 'above', 'across') });
    expect(judged.verdict).toBe('found');
    for (const words of [
      '2 candidates',
      'first at 2 s',
      'dB re full scale',
      'near 60 kHz',
      'as this sensor sees it',
    ]) {
      expect(judged.reason).toContain(words);
    }
    expect(judged.burstEnergyShare).toBeCloseTo((0.02 + 0.98 + 0.5) / 3, 9);
  });

  it('is found with a span alone', () => {
    const spans = [{ channel: 0, startSample: 0, endSample: 128, excessDb: 12 }];
    const judged = judgeUltrasound({ ...quiet, tally: tallyOf(), tracked: [{ spans, spanCount: 1 }] });
    expect(judged.verdict).toBe('found');
    expect(judged.reason).toContain('1 span');
  });

  it('takes no more candidates than chance gives for a finding', () => {
    const judged = judgeUltrasound({ ...quiet, expectedByChance: 1.5, tally: tallyOf('above') });
    expect(judged.verdict).toBe('not-found');
    expect(judged.reason).toContain('at most 1.50');
  });

  it('keeps to the reason where nothing can be observed', () => {
    const judged = judgeUltrasound({
      ...quiet,
      band: { observable: false, reason: 'Because.' },
      tally: tallyOf('above'),
    });
    expect(judged).toMatchObject({
      verdict: 'not-observable',
      reason: 'Because.',
      bandLowHz: null,
      energyShare: null,
      burstEnergyShare: null,
    });
    expect(judged.candidates).toMatchObject({ total: 1, above: 0 });
  });

  describe('of a sensor whose band begins above the hearing line', () => {
    const sensorLowHz = 50_000;
    const contact = { ...quiet, sensorLowHz, band: { ...band, lowHz: sensorLowHz }, energyShare: null };

    function tallyOfBursts(count: number): CandidateTally {
      const tally = new CandidateTally(sensorLowHz);
      for (let n = 0; n < count; n++)
        tally.add(candidateAt(192_000 * (n + 1), 0, { bandLowHz: 60_000, bandHighHz: 80_000 }));
      return tally;
    }

    it('rests on candidates that have no class, and says why they have none', () => {
      const judged = judgeUltrasound({ ...contact, tally: tallyOfBursts(3) });
      expect(judged).toMatchObject({ verdict: 'found', burstEnergyShare: null });
      expect(judged.candidates).toMatchObject({ total: 3, below: 0, across: 0, above: 0 });
      expect(judged.reason).toContain('3 candidates, the first at 1 s');
      expect(judged.reason).toMatch(/begins at 50 kHz: .* no candidate can be placed below, across or above/);
    });

    it('is not found without any', () => {
      const judged = judgeUltrasound({ ...contact, tally: tallyOfBursts(0) });
      expect(judged.verdict).toBe('not-found');
      expect(judged.reason).toContain('50 kHz to 86.4 kHz');
    });
  });

  it('says from where on a sensor sees, where its shares are of that', () => {
    const judged = judgeUltrasound({ ...quiet, sensorLowHz: 8000, tally: tallyOf('above') });
    expect(judged.reason).toContain('Shares and classes are of what lies above 8 kHz');
    for (const sensorLowHz of [null, 500]) {
      expect(judgeUltrasound({ ...quiet, sensorLowHz, tally: tallyOf('above') }).reason).not.toContain(
        'Shares',
      );
    }
  });

  it('never speaks of what can be heard', () => {
    for (const tally of [tallyOf(), tallyOf('above', 'above'), tallyOf('below')]) {
      for (const sensorLowHz of [null, 8000, 50_000]) {
        expect(judgeUltrasound({ ...quiet, sensorLowHz, tally }).reason).not.toMatch(/audible/i);
      }
    }
  });
});

describe('the share of energy above 20 kHz', () => {
  const spectrum = (belowDb: number, aboveDb: number) => ({
    frequenciesHz: [500, 5000, 15_000, 30_000, 60_000, 90_000],
    meanDbPerHz: [belowDb, belowDb, belowDb, aboveDb, aboveDb, aboveDb],
  });

  it('is that of all channels together, in the band that sensor and rate see', () => {
    const channels = [spectrum(-100, -100), spectrum(-100, -100)];
    expect(ultrasonicEnergyShare(channels, null, 86_400)).toBeCloseTo(2 / 5, 9);
    expect(ultrasonicEnergyShare(channels, 10_000, 86_400)).toBeCloseTo(2 / 3, 9);
    expect(ultrasonicEnergyShare(channels, 10_000, 50_000)).toBeCloseTo(1 / 2, 9);
    expect(ultrasonicEnergyShare([spectrum(-100, -110)], null, 86_400)).toBeCloseTo(0.2 / 3.2, 9);
  });

  it('is none in silence, and none where the sensor begins too near to the hearing line', () => {
    expect(ultrasonicEnergyShare([spectrum(-200, -200)], null, 86_400)).toBeNull();
    expect(ultrasonicEnergyShare([spectrum(-100, -100)], 15_800, 86_400)).toBeCloseTo(1, 9);
    expect(ultrasonicEnergyShare([spectrum(-100, -100)], 16_000, 86_400)).toBeNull();
  });
});
