import { describe, expect, it } from 'vitest';
import {
  formatBytes,
  formatClock,
  formatCount,
  formatDecibels,
  formatDuration,
  formatFrequency,
  formatHash,
  formatNumber,
  formatSampleRate,
  formatSeconds,
  formatShare,
  formatTotal,
  formatUtc,
  NO_VALUE,
} from '@/composables/useFormat.ts';

/** Spaces of every kind as plain ones, to read the expectations. */
function plain(text: string): string {
  return text.replace(/[\u00A0\u202F]/g, ' ');
}

describe('numbers', () => {
  it('are grouped in threes by narrow spaces that do not break', () => {
    expect(formatNumber(1_000_000)).toBe('1\u202F000\u202F000');
  });

  it('have a real minus sign', () => {
    expect(formatNumber(-18)).toBe('\u221218');
  });

  it.each([null, undefined, Number.NaN, Number.POSITIVE_INFINITY])('%s has no value', (value) => {
    expect(formatNumber(value)).toBe(NO_VALUE);
    expect(formatFrequency(value)).toBe(NO_VALUE);
    expect(formatShare(value)).toBe(NO_VALUE);
  });
});

describe('units', () => {
  it('stand after a space that does not break', () => {
    expect(formatFrequency(150_000)).toBe('150\u00A0kHz');
  });

  it.each([
    [49.9, '49.9 Hz'],
    [412_000, '412 kHz'],
    [1_000_000, '1 MHz'],
    [999.96, '1 kHz'],
    [0, '0 Hz'],
  ])('frequency %d Hz is %s', (hz, text) => {
    expect(plain(formatFrequency(hz))).toBe(text);
  });

  it.each([
    [228e-6, '228 \u00B5s'],
    [12e-6, '12 \u00B5s'],
    [0.0124, '12.4 ms'],
    [86.4, '86.4 s'],
    [125, '2 min 05 s'],
    [11_520, '3 h 12 min'],
  ])('duration %d s is %s', (seconds, text) => {
    expect(plain(formatDuration(seconds))).toBe(text);
  });

  it('writes a sample rate in full', () => {
    expect(plain(formatSampleRate(1_000_000))).toBe('1 000 000 Hz');
  });

  it('gives levels one decimal and their reference', () => {
    expect(plain(formatDecibels(71.44, 'dB(AE)'))).toBe('71.4 dB(AE)');
    expect(plain(formatDecibels(-52))).toBe('\u221252.0 dB');
  });

  it('counts bytes in powers of ten', () => {
    expect(plain(formatBytes(172_800_000))).toBe('172.8 MB');
    expect(plain(formatBytes(512))).toBe('512 B');
  });
});

describe('places in time', () => {
  it('group the digits after the point', () => {
    expect(plain(formatSeconds(41.3248, 5))).toBe('41.324 80 s');
  });

  it('read like a clock in long recordings', () => {
    expect([41, 725, 3729].map(formatClock)).toEqual(['0:41', '12:05', '1:02:09']);
  });

  it('are given in UTC as files have them', () => {
    expect(formatUtc('2026-12-01T07:17:15.000Z')).toBe('2026-12-01 07:17:15 UTC');
  });
});

describe('shares', () => {
  it.each([
    [0.998, '99.8 %'],
    [0.992, '99.2 %'],
    [0.99001, '99.0 %'],
    [0.98, '98 %'],
    [0.042, '4.2 %'],
    [1, '100 %'],
    [0, '0 %'],
  ])('%d is %s', (share, text) => {
    expect(plain(formatShare(share))).toBe(text);
  });

  it('never round a rest up to all or down to nothing', () => {
    expect(plain(formatShare(0.99996))).toBe('> 99.9 %');
    expect(plain(formatShare(0.0001))).toBe('< 0.1 %');
  });
});

describe('counts', () => {
  it('agree in number with what they count', () => {
    expect(plain(formatCount(1, 'candidate'))).toBe('1 candidate');
    expect(plain(formatCount(214, 'candidate'))).toBe('214 candidates');
    expect(plain(formatCount(2, 'pass', 'passes'))).toBe('2 passes');
  });

  it('say where counting stopped', () => {
    expect(plain(formatTotal({ count: 10_000, capped: true }))).toBe('10 000+');
  });

  it('shorten a checksum to its ends', () => {
    expect(formatHash(`9c41${'0'.repeat(56)}e07a`)).toBe('9c41\u2026e07a');
  });
});
