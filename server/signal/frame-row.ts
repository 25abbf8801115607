import type { FramePlan } from './frame-plan.ts';
import { CEPSTRAL_COEFFICIENTS } from './mel-bank.ts';
import { resolvedBands, type ThirdOctave } from './third-octaves.ts';

/** Columns of the table of long frames that every recording has, in order; each name states the definition and the unit. */
const FIRST_COLUMNS = [
  'rmsDbFs',
  'peakDbFs',
  'crestDb',
  'zeroCrossingsPerSecond',
  'centroidAmplitudeHz',
  'spreadAmplitudeHz',
  'flatnessAmplitude',
  'rolloff99AmplitudeHz',
  'levelAbove20kHzDbFs',
  'shareAbove20kHz',
] as const;
export type FrameColumn = (typeof FIRST_COLUMNS)[number];

const LOWEST_BAND_INDEX = 0;

/** Places of the columns that do not depend on the rate. */
export const CEPSTRAL_COLUMN = FIRST_COLUMNS.length;
export const BAND_COLUMN = CEPSTRAL_COLUMN + CEPSTRAL_COEFFICIENTS;

/** Third octaves of the rows: from 1 kHz up to the last one below Nyquist, as far as the frames resolve them. */
export function rowBands({ long, sampleRateHz }: FramePlan): ThirdOctave[] {
  const bands = resolvedBands(sampleRateHz / long.size, sampleRateHz / 2);
  return bands.filter((band) => band.index >= LOWEST_BAND_INDEX);
}

/** 13 cepstral coefficients by meyda's definition, then the level of each third octave by its exact mid-band frequency. */
export function frameColumns(bands: readonly ThirdOctave[]): string[] {
  const cepstral = Array.from({ length: CEPSTRAL_COEFFICIENTS }, (_, c) => `mfcc${c}`);
  return [...FIRST_COLUMNS, ...cepstral, ...bands.map((band) => `band${Math.round(band.middleHz)}HzDbFs`)];
}
