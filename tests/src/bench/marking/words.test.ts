import { describe, expect, it } from 'vitest';
import { aidsWords, viewWords } from '@/composables/bench/marking/circumstance-words.ts';
import { nextUnit, nudgeSamples } from '@/composables/bench/marking/nudge-step.ts';
import { onsetWords, uncertaintySource, zoomUncertainty } from '@/composables/bench/marking/onset-words.ts';
import { readBandEdge, readPlace } from '@/components/bench/typed-place.ts';
import { benchMark } from './mark-fixture.ts';

const rate = 1_000_000;
const view = {
  startSample: 40_000_000,
  endSample: 42_256_000,
  widthPx: 940,
  areCandidatesShown: false,
  isNormalised: false,
};
const plain = (words: string) => words.replace(/[\u00A0\u202F]/g, ' ');

describe('an onset in words', () => {
  it('shows the digits that its uncertainty leaves meaning to', () => {
    const picked = benchMark({ startSample: 41_324_803, uncertaintySamples: 20, rawStartSample: 41_324_700 });
    expect(plain(onsetWords(picked, rate))).toBe('41.324 80 s \u00B120 \u00B5s, picker');
    const byZoom = benchMark({ startSample: 41_324_803, uncertaintySamples: 1200, view });
    expect(plain(onsetWords(byZoom, rate))).toBe('41.324 8 s \u00B11.2 ms, by the zoom it was set at');
  });

  it('shows every digit down to the sample where nothing is known of it', () => {
    expect(plain(onsetWords(benchMark({ startSample: 41_324_803 }), rate))).toBe('41.324 803 s');
  });

  it('knows who said how far off it may be', () => {
    const uncertaintySamples = zoomUncertainty(view);
    expect(uncertaintySamples).toBe(1200);
    expect(uncertaintySource(benchMark({ uncertaintySamples, view }))).toBe('zoom');
    expect(uncertaintySource(benchMark({ uncertaintySamples, view, origin: 'candidate' }))).toBe('zoom');
    expect(uncertaintySource(benchMark({ uncertaintySamples: 3, view, origin: 'candidate' }))).toBe(
      'detector',
    );
    expect(uncertaintySource(benchMark({ uncertaintySamples: 3, rawStartSample: 4 }))).toBe('picker');
    expect(uncertaintySource(benchMark())).toBeNull();
  });

  it('is never closer than half a sample', () => {
    expect(zoomUncertainty({ startSample: 0, endSample: 16, widthPx: 1000 })).toBe(0.5);
  });
});

describe('circumstances in words', () => {
  it('say what the picture showed and how it was listened to', () => {
    expect(plain(viewWords(view, rate))).toBe('2.26 s in 940 pixels, no candidates shown');
    expect(viewWords({ ...view, isNormalised: true }, rate)).toMatch(/background taken off$/);
    const aids = { mode: 'slowed' as const, slow: 20, carrierHz: null, gate: 'span' as const };
    expect(aidsWords(aids)).toBe('slowed 20 times, noise gated by an own quiet span');
    expect(plain(aidsWords({ ...aids, mode: 'shifted', carrierHz: 147_000, gate: 'off' }))).toBe(
      'shifted by 147 kHz',
    );
  });
});

describe('the step of a nudge', () => {
  const at = { window: { startSample: 0, endSample: 5000 }, widthPx: 1000, sampleRateHz: 192_000 };

  it('is a pixel, a sample or a millisecond, and always at least a sample', () => {
    expect(nudgeSamples('pixel', at)).toBe(5);
    expect(nudgeSamples('pixel', { ...at, widthPx: 40_000 })).toBe(1);
    expect(nudgeSamples('sample', at)).toBe(1);
    expect(nudgeSamples('millisecond', at)).toBe(192);
    expect(nudgeSamples('millisecond', { ...at, sampleRateHz: 10 })).toBe(1);
  });

  it('goes around', () => {
    expect(nextUnit(nextUnit(nextUnit('pixel')))).toBe('pixel');
  });
});

describe('typed numbers', () => {
  const limits = { least: 100, most: 5000, sampleRateHz: 1000 };

  it('are taken in seconds or samples, with comma or point', () => {
    expect(readPlace('1,5', 'seconds', limits).value).toBe(1500);
    expect(readPlace(' 1 500 ', 'samples', limits).value).toBe(1500);
  });

  it('are refused with a sentence, never moved', () => {
    expect(readPlace('soon', 'seconds', limits).fault).toMatch(/time in seconds/);
    expect(readPlace('', 'samples', limits).fault).toMatch(/whole number/);
    expect(readPlace('12.5', 'samples', limits).fault).toMatch(/whole numbers/);
    expect(plain(readPlace('0.05', 'seconds', limits).fault ?? '')).toBe('At least 0.100 s.');
    expect(plain(readPlace('9000', 'samples', limits).fault ?? '')).toBe('At most 5 000.');
  });

  it('make a band only in order and below half the sample rate', () => {
    const band = { mostHz: 48_000, lowHz: null, highHz: null };
    expect(readBandEdge('20.5', band)).toEqual({ value: 20_500, fault: null });
    expect(readBandEdge('', band)).toEqual({ value: null, fault: null });
    expect(readBandEdge('-3', band).fault).toMatch(/below 0/);
    expect(plain(readBandEdge('60', band).fault ?? '')).toMatch(/At most 48 kHz/);
    expect(plain(readBandEdge('20', { ...band, lowHz: 30_000 }).fault ?? '')).toMatch(/above 30 kHz/);
    expect(plain(readBandEdge('40', { ...band, highHz: 30_000 }).fault ?? '')).toMatch(/below 30 kHz/);
    expect(readBandEdge('high', band).fault).toMatch(/in kHz/);
  });
});
