import { describe, expect, it } from 'vitest';
import type { AudioFormat } from '../../../shared/contract/measurement.ts';
import { findBandwidth } from '../../../server/signal/bandwidth.ts';
import { contentFindings, type ContentFacts } from '../../../server/signal/quality-content.ts';

const format: AudioFormat = {
  ...{ container: 'RIFF', encoding: 'integer', bitsPerSample: 24, channels: 2, sampleRateHz: 96_000 },
  ...{ frames: 9_600_000, extensible: false, warnings: [] },
};
const noEdge = { effectiveHz: 48_000, edge: 'none', reason: 'no edge' } as const;
const wholeBits = { bits: 24, zeroBits: 0, codesPerUsed: 1 };

function findingsOf(facts: Partial<ContentFacts>) {
  return contentFindings({
    ...{
      format,
      sensorHighHz: null,
      contents: [{ bits: wholeBits, speech: [] }],
      alike: [],
      bandwidth: noEdge,
    },
    ...facts,
  });
}

function edgeAt(edgeHz: number, sampleRateHz = 96_000) {
  const stepHz = 50;
  const frequenciesHz = Array.from({ length: sampleRateHz / 2 / stepHz - 1 }, (_, k) => (k + 1) * stepHz);
  const floorDbPerHz = frequenciesHz.map((hz) => (hz < edgeHz ? -100 : -150));
  return findBandwidth({ sampleRateHz, frequenciesHz, floorDbPerHz });
}

describe('findings about what a recording holds', () => {
  it('are none where it holds what its format promises', () => {
    expect(findingsOf({})).toEqual([]);
  });

  it('name places that may be speech once over all channels, and say that it is no proof', () => {
    const span = (startS: number, endS: number) => ({
      startSample: startS * 96_000,
      endSample: endS * 96_000,
    });
    const [found, ...rest] = findingsOf({
      contents: [
        { bits: wholeBits, speech: [span(10, 13), span(40, 42)] },
        { bits: wholeBits, speech: [span(11, 14)] },
        { bits: wholeBits, speech: null },
      ],
    });
    expect(rest).toEqual([]);
    expect(found).toMatchObject({
      code: 'speech',
      weight: 'caution',
      count: 2,
      places: [
        { channel: 0, ...span(10, 14) },
        { channel: 0, ...span(40, 42) },
      ],
    });
    expect(found!.sentence).toMatch(/in 2 places, the first at 10 s.*no proof/);
  });

  it.each([
    [16_000, 'lossy-or-converted', /lossy compression/],
    [20_050, 'lossy-or-converted', /lossy compression.*or conversion from 44.1 kHz/],
    [23_500, 'lossy-or-converted', /converted from a sample rate of 48 kHz/],
    [29_000, 'band-limited', /filter in the recorder/],
  ] as const)('name an edge of the floor at %d Hz as %s', (edgeHz, code, words) => {
    const [found] = findingsOf({ bandwidth: edgeAt(edgeHz) });
    expect(found).toMatchObject({ code, weight: 'caution', sentence: expect.stringMatching(words) });
  });

  it('take an edge near the end of the sensor band for that of the sensor', () => {
    const [found] = findingsOf({ bandwidth: edgeAt(30_000), sensorHighHz: 32_000 });
    expect(found).toMatchObject({ code: 'band-limited', weight: 'note' });
    expect(found!.sentence).toContain('stated band of the sensor does (32 kHz)');
  });

  it.each([
    [
      { bits: 16, zeroBits: 8, codesPerUsed: 256 },
      format,
      'note',
      /stores 24 bits.*lowest 8 are always zero: it carries 16 bits/,
    ],
    [
      { bits: 23, zeroBits: 1, codesPerUsed: 2 },
      format,
      'note',
      /the lowest is always zero: it carries 23 bits/,
    ],
    [{ bits: 12, zeroBits: 12, codesPerUsed: 4096 }, format, 'caution', /it carries 12 bits/],
    [
      { bits: 15.4, zeroBits: 0, codesPerUsed: 1.5 },
      { ...format, bitsPerSample: 16 },
      'caution',
      /one in 1.5 of the values.*about 15.4 bits/,
    ],
    [
      { bits: 15.6, zeroBits: 0, codesPerUsed: 335 },
      format,
      'note',
      /one in 335 of the values.*about 15.6 bits/,
    ],
    [
      { bits: 16, zeroBits: 8, codesPerUsed: 256 },
      { ...format, encoding: 'float', bitsPerSample: 32 } as const,
      'note',
      /multiple of 2\^-15 of full scale: what is stored in 32-bit floats was taken with 16 bits/,
    ],
  ])('tell that fewer bits are carried than stored (%o)', (bits, stored, weight, words) => {
    const silent = { bits: { bits: null, zeroBits: 0, codesPerUsed: null }, speech: [] };
    const found = findingsOf({ format: stored, contents: [silent, { bits, speech: [] }] });
    expect(found).toMatchObject([{ code: 'effective-bits', weight, sentence: expect.stringMatching(words) }]);
  });

  it('tell nothing of bits where one channel uses all of them', () => {
    const padded = { bits: { bits: 16, zeroBits: 8, codesPerUsed: 256 }, speech: [] };
    expect(findingsOf({ contents: [padded, { bits: wholeBits, speech: [] }] })).toEqual([]);
  });

  it('name channels that are nearly the same, with their gain and sign', () => {
    const alike = [
      { channel: 0, other: 1, correlation: -0.99998, gainDb: -6.02 },
      { channel: 0, other: 2, correlation: 0.99995, gainDb: 0.01 },
    ];
    const sentences = findingsOf({ alike }).map(({ code, sentence }) => `${code}: ${sentence}`);
    expect(sentences[0]).toMatch(
      /^channels-alike: Channels 0 and 1 .*0.99998, channel 1 6.0 dB lower, with opposite sign\)/,
    );
    expect(sentences[1]).toMatch(/Channels 0 and 2 .*\(correlation 0.99995\)/);
  });
});
