import { expect, it } from 'vitest';
import { durationText, frequencyText, levelText } from '../../../shared/audio/unit-text.ts';

it.each([
  [50, '50 Hz'],
  [44_100, '44.1 kHz'],
  [192_000, '192 kHz'],
  [1_000_000, '1 MHz'],
  [20_000_001, '20 MHz'],
])('%d Hz is written as %s', (frequencyHz, text) => {
  expect(frequencyText(frequencyHz)).toBe(text);
});

it.each([
  [0, '0 µs'],
  [85e-6, '85 µs'],
  [0.999_7e-3, '1 ms'],
  [0.0125, '12.5 ms'],
  [4.2, '4.2 s'],
  [59.97, '1 min 00 s'],
  [200, '3 min 20 s'],
  [3599.8, '1 h 00 min'],
  [7500, '2 h 05 min'],
])('%d s are written as %s', (seconds, text) => {
  expect(durationText(seconds)).toBe(text);
});

it('a level has one figure after the point, a true minus and its unit, or is a dash', () => {
  expect(levelText(-12.345, 'dB')).toBe('−12.3 dB');
  expect(levelText(80, 'dB(AE)')).toBe('80.0 dB(AE)');
  expect(levelText(null, 'dB')).toBe('–');
});
