import { rmsToDb } from '../../shared/audio/units.ts';
import type { BandLevel } from '../../shared/contract/measurement.ts';
import { powerQuantile } from './power-quantile.ts';
import { openPlainTables, spectrumMark, type SpectrumTables } from './spectrum-tables.ts';
import type { ThirdOctave } from './third-octaves.ts';

/** What the frames of one segment add to the levels of its bands; plain data. */
export interface BandLevelsPart {
  sums: Float64Array;
  maximum: Float32Array;
  counts: Uint32Array;
  frames: number;
}

/** The floor is what nine frames of ten exceed. */
const FLOOR_SHARE = 0.1;
const ONE_COUNTED = Int32Array.of(spectrumMark(0, true));

/**
 * Levels of bands over time: the noise floor, the median, the mean and the highest frame, by AES17.
 *
 * The floor is the tenth percentile of the frames. Chance pulls it below the mean of steady noise, the more the fewer lines a
 * band has (by 6 dB in the narrowest, 2 dB at 20 lines, 1 dB at 60); it says how quiet the quiet is, not the mean of it.
 * Cost: a few nanoseconds per band and frame; memory 1.2 kB per band.
 */
export class BandLevels {
  readonly #bands: readonly ThirdOctave[];
  readonly #tables: SpectrumTables;
  #frames = 0;

  constructor(bands: readonly ThirdOctave[]) {
    this.#bands = bands;
    this.#tables = openPlainTables({ points: bands.length, group: 1, classes: 1, capacity: 1 });
  }

  /** @param meanSquares one per band, of a frame that is not silent. */
  push(meanSquares: Float32Array): void {
    this.#tables.push(meanSquares, meanSquares.length, ONE_COUNTED);
    this.#frames++;
  }

  get part(): BandLevelsPart {
    const { sums, maximum, counts } = this.#tables;
    return { sums, maximum, counts, frames: this.#frames };
  }

  /** Takes in the frames that another one of the same bands was given. */
  absorb({ sums, maximum, counts, frames }: BandLevelsPart): void {
    const tables = this.#tables;
    sums.forEach((sum, band) => (tables.sums[band]! += sum));
    maximum.forEach((value, band) => (tables.maximum[band] = Math.max(tables.maximum[band]!, value)));
    counts.forEach((count, cell) => (tables.counts[cell]! += count));
    this.#frames += frames;
  }

  /**
   * None without frames. `null` for a level of nothing.
   * @param gain of the mean squares of each band, where a filter before took some away.
   */
  finish(gain: (band: ThirdOctave) => number = () => 1): BandLevel[] {
    if (this.#frames === 0) return [];
    const { sums, maximum, counts } = this.#tables;
    const floors = powerQuantile(counts, this.#frames, FLOOR_SHARE);
    const medians = powerQuantile(counts, this.#frames, 0.5);
    return this.#bands.map((band, index) => {
      const { lowHz, middleHz, highHz } = band;
      const level = (meanSquare: number) => rmsToDb(Math.sqrt(meanSquare * gain(band)));
      return {
        ...{ lowHz, middleHz, highHz },
        floorDb: level(floors[index]!),
        medianDb: level(medians[index]!),
        meanDb: level(sums[index]! / this.#frames),
        maximumDb: level(maximum[index]!),
      };
    });
  }
}
