import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { listenQuerySchema, longestListenS } from '@shared/contract/listening.ts';
import type { ListeningAids } from '@shared/contract/mark-circumstances.ts';
import {
  clampCarrier,
  firstCarrier,
  gainOf,
  heardBandHz,
  isPlayedByBrowsers,
  JOINT_S,
  nextPieceStart,
  planPlay,
  renditionQuery,
  sampleHeard,
  SLOW_FACTORS,
} from '@/composables/bench/listening.ts';
import { besideWords, heardWords, lastsWords, spanWords } from '@/composables/bench/listening-words.ts';

const facts = { sampleRateHz: 192_000, isOriginalPlayable: true, isLooping: false };
const asRecorded: ListeningAids = { mode: 'as-recorded', slow: 1, carrierHz: null, gate: 'off' };
const slowed = (slow: number): ListeningAids => ({ ...asRecorded, mode: 'slowed', slow });
const shifted = (carrierHz: number, slow = 1): ListeningAids => ({
  ...asRecorded,
  mode: 'shifted',
  slow,
  carrierHz,
});
const gated: ListeningAids = { ...asRecorded, gate: 'machine' };

describe('listening', () => {
  it('never gives a browser a file that is no sound to it', () => {
    const containers = ['RIFF', 'RF64', 'BW64', 'FLAC', 'raw', 'CSV', 'capture-set'] as const;
    expect(containers.filter(isPlayedByBrowsers)).toEqual(['RIFF', 'FLAC']);
  });

  it('plays the file itself where the browser can, and a rendition above that rate, changed, or in a loop', () => {
    const span = { startSample: 1000, endSample: 200_000 };
    expect(planPlay(span, asRecorded, facts).source).toBe('original');
    expect(planPlay(span, asRecorded, { ...facts, sampleRateHz: 500_000 }).source).toBe('rendition');
    expect(planPlay(span, asRecorded, { ...facts, isOriginalPlayable: false }).source).toBe('rendition');
    expect(planPlay(span, asRecorded, { ...facts, isLooping: true }).source).toBe('rendition');
    for (const aids of [slowed(20), shifted(40_000), gated])
      expect(planPlay(span, aids, facts).source).toBe('rendition');
  });

  it('knows at each moment which sample is heard', () => {
    const original = planPlay({ startSample: 96_000, endSample: 192_000 }, asRecorded, facts);
    expect(original.offsetS).toBe(0.5);
    expect(sampleHeard(original, 0.75)).toBe(144_000);
    const ten = planPlay({ startSample: 96_000, endSample: 192_000 }, slowed(10), facts);
    expect(sampleHeard(ten, 1)).toBe(96_000 + 19_200);
  });

  it('never asks for more than the server gives, and always for what it understands', () => {
    fc.assert(
      fc.property(
        fc.double({ min: 0, max: 1e9, noNaN: true }),
        fc.double({ min: 1, max: 1e9, noNaN: true }),
        fc
          .constantFrom(...SLOW_FACTORS)
          .chain((slow) => fc.constantFrom(slowed(slow), shifted(40_000, slow), gated)),
        fc.constantFrom(44_100, 192_000, 500_000, 1_000_000),
        fc.boolean(),
        (startSample, length, aids, sampleRateHz, isLooping) => {
          const span = { startSample, endSample: startSample + length };
          const plan = planPlay(span, aids, { sampleRateHz, isOriginalPlayable: false, isLooping });
          const samples = plan.endSample - plan.startSample;
          expect(samples).toBeGreaterThan(0);
          expect((samples / sampleRateHz) * aids.slow).toBeLessThanOrEqual(longestListenS);
          expect(samples).toBeLessThanOrEqual(8_000_000);
          const query = renditionQuery(plan, 0, { startSample: 5, endSample: 90_000 });
          expect(listenQuerySchema.safeParse(query).success).toBe(true);
        },
      ),
    );
  });

  it('joins the pieces of a long span by their fades, and comes to its end', () => {
    const span = { startSample: 0, endSample: 20_000_000 };
    let plan = planPlay(span, gated, facts);
    let pieces = 1;
    while (plan.endSample < span.endSample) {
      const startSample = nextPieceStart(plan);
      expect(plan.endSample - startSample).toBe(Math.round(JOINT_S * 192_000));
      plan = planPlay({ startSample, endSample: span.endSample }, gated, facts);
      pieces += 1;
    }
    expect(pieces).toBe(7);
  });

  it('asks for the noise of the machine or of a drawn span', () => {
    const plan = planPlay({ startSample: 10, endSample: 20 }, { ...gated, gate: 'span' }, facts);
    expect(renditionQuery(plan, 2, { startSample: 3, endSample: 9 })).toEqual({
      channel: 2,
      startSample: 10,
      endSample: 20,
      slow: 1,
      gate: 'span',
      gateStartSample: 3,
      gateEndSample: 9,
    });
    expect(renditionQuery({ ...plan, aids: gated }, 0, null)).toMatchObject({ gate: 'machine' });
  });

  it('starts low, goes no higher than the limiter holds, and stays low without one', () => {
    expect(gainOf(-18, true)).toBeCloseTo(0.1259, 4);
    expect(gainOf(99, true)).toBeCloseTo(10 ** (12 / 20), 6);
    expect(gainOf(0, false)).toBeCloseTo(10 ** (-24 / 20), 6);
  });

  it('keeps the carrier where something above it can be heard', () => {
    expect(clampCarrier(42_049, 192_000)).toBe(42_000);
    expect(clampCarrier(500_000, 192_000)).toBe(86_400);
    expect(clampCarrier(-3, 192_000)).toBe(1000);
    expect(firstCarrier(1_000_000, 150_000)).toBe(147_000);
    expect(firstCarrier(1_000_000, null)).toBe(40_000);
    expect(firstCarrier(96_000, null)).toBe(24_000);
    expect(heardBandHz(40_000, 1, 192_000)).toBe(58_000);
    expect(heardBandHz(80_000, 2, 192_000)).toBe(96_000);
  });
});

describe('the words for what is heard', () => {
  it('give an example in frequencies', () => {
    expect(heardWords(slowed(20), 1_000_000, 150_000)).toBe(
      '20 times slower: 150\u00A0kHz is heard as 7.5\u00A0kHz',
    );
    expect(heardWords(slowed(10), 192_000, null)).toBe('10 times slower: 50\u00A0kHz is heard as 5\u00A0kHz');
    expect(heardWords(asRecorded, 192_000, null)).toBe('As recorded: heard up to 20 kHz');
    expect(heardWords(asRecorded, 32_000, null)).toBe('As recorded');
  });

  it('name the carrier, and what it moves where', () => {
    expect(heardWords(shifted(40_000), 192_000, null)).toBe('Shifted: 42\u00A0kHz is heard as 2\u00A0kHz');
    expect(heardWords(shifted(147_000), 1_000_000, 150_000)).toBe(
      'Shifted: 150\u00A0kHz is heard as 3\u00A0kHz',
    );
    expect(heardWords(shifted(40_000, 2), 192_000, null)).toBe(
      'Shifted, 2 times slower: 44\u00A0kHz is heard as 2\u00A0kHz',
    );
    expect(besideWords(shifted(40_000))).toBe('Distances in hertz stay, ratios do not.');
    expect(besideWords({ ...shifted(40_000), gate: 'span' })).toContain('Hum is 20\u00A0dB down');
    expect(besideWords(asRecorded)).toBe('');
  });

  it('say how long it lasts and where the noise was taken', () => {
    expect(lastsWords(20_000, 1_000_000, 20)).toBe('20\u00A0ms lasts 400\u00A0ms');
    expect(spanWords({ startSample: 0, endSample: 403_200 }, 192_000)).toBe('0.0\u20132.1\u00A0s');
    expect(spanWords({ startSample: 192_000, endSample: 199_680 }, 192_000)).toBe('1.000\u20131.040\u00A0s');
  });
});
