import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { longestListenS } from '@shared/contract/listening.ts';
import {
  gainOf,
  heardWords,
  isPlayedByBrowsers,
  planPlay,
  sampleHeard,
  SLOW_FACTORS,
} from '@/composables/bench/listening.ts';

const playable = { sampleRateHz: 192_000, isOriginalPlayable: true };

describe('listening', () => {
  it('never gives a browser a file that is no sound to it', () => {
    const containers = ['RIFF', 'RF64', 'BW64', 'FLAC', 'raw', 'CSV', 'capture-set'] as const;
    expect(containers.filter(isPlayedByBrowsers)).toEqual(['RIFF', 'FLAC']);
  });

  it('plays the file itself where the browser can, and a rendition above that rate or slowed', () => {
    const span = { startSample: 1000, endSample: 200_000 };
    expect(planPlay(span, 1, playable).source).toBe('original');
    expect(planPlay(span, 1, { ...playable, sampleRateHz: 500_000 }).source).toBe('rendition');
    expect(planPlay(span, 1, { ...playable, isOriginalPlayable: false }).source).toBe('rendition');
    expect(planPlay(span, 20, playable).source).toBe('rendition');
  });

  it('knows at each moment which sample is heard', () => {
    const original = planPlay({ startSample: 96_000, endSample: 192_000 }, 1, playable);
    expect(original.offsetS).toBe(0.5);
    expect(sampleHeard(original, 0.75)).toBe(144_000);
    const slowed = planPlay({ startSample: 96_000, endSample: 192_000 }, 10, playable);
    expect(sampleHeard(slowed, 1)).toBe(96_000 + 19_200);
  });

  it('never asks for more than the server gives', () => {
    fc.assert(
      fc.property(
        fc.double({ min: 0, max: 1e9, noNaN: true }),
        fc.double({ min: 1, max: 1e9, noNaN: true }),
        fc.constantFrom(...SLOW_FACTORS),
        fc.constantFrom(44_100, 192_000, 500_000, 1_000_000),
        (startSample, length, slow, sampleRateHz) => {
          const span = { startSample, endSample: startSample + length };
          const plan = planPlay(span, slow, { sampleRateHz, isOriginalPlayable: false });
          const samples = plan.endSample - plan.startSample;
          expect(samples).toBeGreaterThan(0);
          expect((samples / sampleRateHz) * slow).toBeLessThanOrEqual(longestListenS);
          expect(samples).toBeLessThanOrEqual(24_000_000);
        },
      ),
    );
  });

  it('keeps six decibels below full scale, whatever level is asked for', () => {
    expect(gainOf(0)).toBeCloseTo(10 ** (-6 / 20), 6);
    expect(gainOf(-18)).toBeCloseTo(0.1259, 4);
  });

  it('says what is heard', () => {
    expect(heardWords(20, 1_000_000, 150_000)).toBe('20 times slower: 150\u00A0kHz is heard as 7.5\u00A0kHz');
    expect(heardWords(10, 192_000, null)).toBe('10 times slower: 50\u00A0kHz is heard as 5\u00A0kHz');
    expect(heardWords(1, 192_000, null)).toBe('As recorded: heard up to 20 kHz');
    expect(heardWords(1, 32_000, null)).toBe('As recorded');
  });
});
