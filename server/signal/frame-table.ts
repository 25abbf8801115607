import { FEATURE } from './frame-engine.ts';
import { SILENCE_MEAN_SQUARE } from './frame-spectrum.ts';
import { BAND_COLUMN, CEPSTRAL_COLUMN } from './frame-row.ts';
import { CEPSTRAL_COEFFICIENTS } from './mel-bank.ts';

export interface FeatureRows {
  features: Float32Array;
  featureStride: number;
  /** Third octaves of a row. */
  bands: number;
  /** Changes of sign of a frame to zero crossings per second. */
  crossingsToHz: number;
}

/**
 * Writes the first `count` rows of features as rows of the table of long frames, one behind the other.
 *
 * Levels by AES17, 10 log10(2 x mean square); a silent frame has NaN in every column but the peak, which is NaN as well when
 * there is none, and so has a level of nothing.
 */
export function writeFrameTable(rows: FeatureRows, count: number, table: Float32Array): void {
  const columns = BAND_COLUMN + rows.bands;
  for (let row = 0; row < count; row++) writeRow(rows, row * rows.featureStride, table, row * columns);
}

function writeRow(
  { features, bands, crossingsToHz }: FeatureRows,
  at: number,
  table: Float32Array,
  to: number,
) {
  table.fill(Number.NaN, to, to + BAND_COLUMN + bands);
  const peak = features[at + FEATURE.peak]!;
  const meanSquare = features[at + FEATURE.meanSquare]!;
  if (peak > 0) table[to + 1] = 20 * Math.log10(peak);
  if (meanSquare < SILENCE_MEAN_SQUARE) return;
  table[to] = levelOf(meanSquare);
  table[to + 2] = 20 * Math.log10(peak / Math.sqrt(meanSquare));
  table[to + 3] = features[at + FEATURE.crossings]! * crossingsToHz;
  table[to + 4] = features[at + FEATURE.centroidHz]!;
  table[to + 5] = features[at + FEATURE.spreadHz]!;
  table[to + 6] = features[at + FEATURE.flatness]!;
  table[to + 7] = features[at + FEATURE.rolloff99AmplitudeHz]!;
  const above = features[at + FEATURE.ultrasonicMeanSquare]!;
  table[to + 8] = levelOf(above);
  table[to + 9] = above / features[at + FEATURE.totalMeanSquare]!;
  for (let c = 0; c < CEPSTRAL_COEFFICIENTS; c++) {
    table[to + CEPSTRAL_COLUMN + c] = features[at + FEATURE.cepstral + c]!;
  }
  for (let b = 0; b < bands; b++) {
    table[to + BAND_COLUMN + b] = levelOf(features[at + FEATURE.thirdOctaves + b]!);
  }
}

function levelOf(meanSquare: number): number {
  return meanSquare >= SILENCE_MEAN_SQUARE ? 10 * Math.log10(2 * meanSquare) : Number.NaN;
}
