import { amplitudeToDb, rmsToDb } from '../../shared/audio/units.ts';
import { SILENCE_MEAN_SQUARE } from './frame-spectrum.ts';
import { HEARING_LINE_HZ } from './hearing-line.ts';
import type { RegionSpectrum } from './region-spectrum.ts';

export interface RegionLevels {
  /** Without the mean; a full-scale sine has 0 dB (AES17). `null` for silence. */
  rmsDb: number | null;
  /** Largest magnitude as recorded, dB re full scale. */
  peakDb: number | null;
  /** Peak over plain rms, dB; a sine has 3.01 dB. */
  crestDb: number | null;
}

/**
 * Levels of a span, by the definitions of the levels of a channel.
 *
 * @param samples full scale 1, finite, one or more. Cost: two passes. Source: AES17-2015, 3.12.
 */
export function regionLevels(samples: Float32Array): RegionLevels {
  const mean = meanOf(samples);
  let squares = 0;
  let peak = 0;
  for (const sample of samples) {
    squares += (sample - mean) ** 2;
    if (Math.abs(sample) > peak) peak = Math.abs(sample);
  }
  const meanSquare = squares / samples.length;
  const rms = meanSquare < SILENCE_MEAN_SQUARE ? 0 : Math.sqrt(meanSquare);
  return {
    rmsDb: rmsToDb(rms),
    peakDb: amplitudeToDb(peak),
    crestDb: rms > 0 ? 20 * Math.log10(peak / rms) : null,
  };
}

/** In double precision: the mean of a large offset must not hide a quiet sound. */
function meanOf(samples: Float32Array): number {
  let sum = 0;
  for (const sample of samples) sum += sample;
  return sum / samples.length;
}

export interface SpectrumFigures {
  peakFrequencyHz: number | null;
  /** sum(f d) / sum(d): the mean frequency of the power. */
  centroidHz: number | null;
  /** sum(d, f at 20 kHz and above) / sum(d); `null` where the rate leaves nothing above, or in silence. */
  shareAbove20kHz: number | null;
}

/** What a density says in three numbers; all `null` without a spectrum or without any power in it. */
export function spectrumFigures(spectrum: RegionSpectrum | null): SpectrumFigures {
  let total = 0;
  let above = 0;
  let moment = 0;
  let loudest = -1;
  const { density, binHz } = spectrum ?? { density: new Float64Array(0), binHz: 0 };
  for (const [line, power] of density.entries()) {
    const hz = (line + 1) * binHz;
    total += power;
    moment += hz * power;
    if (hz >= HEARING_LINE_HZ) above += power;
    if (loudest < 0 || power > density[loudest]!) loudest = line;
  }
  if (total === 0) return { peakFrequencyHz: null, centroidHz: null, shareAbove20kHz: null };
  const reachesAbove = density.length * binHz >= HEARING_LINE_HZ;
  return {
    peakFrequencyHz: (loudest + 1) * binHz,
    centroidHz: moment / total,
    shareAbove20kHz: reachesAbove ? above / total : null,
  };
}
