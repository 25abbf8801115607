import { setImmediate as nextTurn } from 'node:timers/promises';
import type { RegionFigures, RegionReport } from '../../shared/contract/region.ts';
import { DENSITY_FLOOR_DB } from '../signal/long-term-spectrum.ts';
import { regionLevels, spectrumFigures } from '../signal/region-figures.ts';
import { regionSpectrum, type RegionSpectrum } from '../signal/region-spectrum.ts';
import { BlockReader, type AudioPlace } from './block-reader.ts';

export interface RegionInput {
  filePath: string;
  header: AudioPlace;
  /** The true rate: a declared time expansion is applied already. */
  sampleRateHz: number;
  channel: number;
  startSample: number;
  /** Exclusive. */
  endSample: number;
}

interface Span {
  startSample: number;
  endSample: number;
}

/** Stretches of the recording among which the quiet one is chosen. */
const STRETCHES = 32;
const LONGEST_STRETCH = 65_536;
/** So many of them are quieter than the one that stands for the quiet: neither the least by chance nor a loud one. */
const QUIET_RANK_SHARE = 0.25;

/**
 * Levels and spectrum of a span, on the untouched samples, and of a quiet stretch of the same channel: of 32 that are spread
 * evenly over the recording, as long as the span (at most 65,536 samples) and outside of it, the one than which a quarter
 * are quieter by rms. Without any stretch outside, `quiet` is `null`.
 */
export async function measureRegion(input: RegionInput): Promise<RegionReport> {
  const { channel, startSample, endSample } = input;
  const reader = await BlockReader.open(input.filePath, input.header);
  try {
    const region = await figuresOf(reader, input, { startSample, endSample });
    const stretch = await quietStretch(reader, input);
    const quiet = stretch && (await figuresOf(reader, input, stretch));
    return { channel, region, quiet };
  } finally {
    await reader.close();
  }
}

async function figuresOf(reader: BlockReader, input: RegionInput, span: Span): Promise<RegionFigures> {
  const { channel, sampleRateHz } = input;
  const samples = await reader.readChannel(channel, span.startSample, span.endSample - span.startSample);
  await nextTurn();
  const spectrum = regionSpectrum(samples, sampleRateHz);
  return {
    ...span,
    durationS: samples.length / sampleRateHz,
    ...regionLevels(samples),
    ...spectrumFigures(spectrum),
    spectrum: spectrum && inDecibels(spectrum),
  };
}

function inDecibels({ density, ...facts }: RegionSpectrum): NonNullable<RegionFigures['spectrum']> {
  // A hundredth of a decibel is finer than any line is known.
  const toDb = (power: number) => Math.max(DENSITY_FLOOR_DB, Math.round(1000 * Math.log10(power)) / 100);
  return { ...facts, densityDbPerHz: Array.from(density, toDb) };
}

async function quietStretch(reader: BlockReader, region: RegionInput): Promise<Span | null> {
  const levels: { span: Span; rmsDb: number }[] = [];
  for (const span of stretchesOutside(region, reader.frames)) {
    const samples = await reader.readChannel(
      region.channel,
      span.startSample,
      span.endSample - span.startSample,
    );
    levels.push({ span, rmsDb: regionLevels(samples).rmsDb ?? Number.NEGATIVE_INFINITY });
  }
  levels.sort((a, b) => a.rmsDb - b.rmsDb);
  return levels[Math.floor(levels.length * QUIET_RANK_SHARE)]?.span ?? null;
}

/** Evenly spread, none of which touches the region. */
export function stretchesOutside({ startSample, endSample }: Span, frames: number): Span[] {
  const samples = Math.min(endSample - startSample, LONGEST_STRETCH);
  const count = Math.min(STRETCHES, Math.floor(frames / samples));
  return Array.from({ length: count }, (_, index) => {
    const from = count > 1 ? Math.round((index * (frames - samples)) / (count - 1)) : 0;
    return { startSample: from, endSample: from + samples };
  }).filter((span) => span.endSample <= startSample || span.startSample >= endSample);
}
