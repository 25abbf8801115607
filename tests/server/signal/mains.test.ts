import { describe, expect, test } from 'vitest';
import { mix, sine, whiteNoiseSignal } from '../../support/wav/signals.ts';
import { mainsLinesOf } from './mains-lines.ts';

const sampleRateHz = 8000;
const frames = 8 * sampleRateHz;

function linesOf(...frequenciesHz: number[]): number[] {
  const lines = frequenciesHz.map((hz) => sine(frames, hz, sampleRateHz, 0.01));
  const signal = mix(whiteNoiseSignal(frames, 0.0001, 5), ...lines);
  return mainsLinesOf(signal, sampleRateHz).map((line) => line.frequencyHz);
}

describe('lines of the mains', () => {
  test('are found at multiples of 50 Hz and of 60 Hz', () => {
    expect(linesOf(50, 100, 150)).toEqual([50, 100, 150]);
    expect(linesOf(60, 180)).toEqual([60, 180]);
  });

  test('are told once where a multiple belongs to both', () => {
    expect(linesOf(50, 100, 300)).toEqual([50, 100, 300]);
  });

  test('are not found in noise', () => {
    expect(linesOf()).toEqual([]);
  });
});
