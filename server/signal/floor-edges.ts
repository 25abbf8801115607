import { BANDS_PER_OCTAVE, type OctaveBand } from './band-energy.ts';
import type { OctaveFloor } from './octave-floor.ts';

/** Below an edge the noise is that many times as dense as above it: 12 dB. */
const LEAST_FALL = 10 ** 1.2;
/** Below, tones of mains and machines may fill every sub-band up to one. */
const LOWEST_EDGE_HZ = 3000;
/** Sub-bands below and above an edge that it is told by. */
const BANDS_BELOW = 8;
const BANDS_ABOVE = 4;
/** The filters of a split reach up to a fifth over its edge, and back from as far below. */
const SKIRT_RATIO = Math.SQRT2;
/** Noise above an edge that is its own, over that below: 20 dB less within the skirts, 40 dB less beyond, far above what leaks there. */
const OWN_WITHIN_SKIRTS = 1e-2;
const OWN_BEYOND_SKIRTS = 1e-4;
/** Cells after which the filters have forgotten how a recording begins, 100 dB down. */
const SETTLING_CELLS = 128;

/** Noise power density of a sub-band, in any unit. */
export interface SubBandNoise {
  readonly lowHz: number;
  readonly highHz: number;
  readonly density: number;
  /** Whether the beginning of the recording is forgotten there by far more than the noise below an edge stands over it. */
  readonly isSettled: boolean;
}

interface Edge {
  readonly band: number;
  readonly highHz: number;
  readonly densityBelow: number;
}

/**
 * Which sub-bands can be watched where the noise floor collapses at an edge: a converter's or recorder's filter, a codec's wall.
 *
 * A sub-band holds an edge if the density falls by at least 12 dB from the sub-band under it to the one above it, and by as much from
 * the eight under it to the four above it (second lowest and second highest: neither a resonance below nor a tone above makes or hides an
 * edge). In it the noise is narrower than its values are counted for. Above it what leaks from below is no noise of that sub-band's own: it
 * is watched only where its density lies less than 20 dB under that below the edge, from half an octave up less than 40 dB, and
 * where filters still ring from the beginning of the recording not at all.
 *
 * @param bands by rising frequency, without gaps; densities that are 0 or not finite hold no edge.
 */
export function watchableSubBands(bands: readonly SubBandNoise[]): boolean[] {
  const edges = findEdges(bands);
  return bands.map(({ lowHz, density, isSettled }, band) =>
    edges.every((edge) => {
      if (band === edge.band) return false;
      const share = lowHz < SKIRT_RATIO * edge.highHz ? OWN_WITHIN_SKIRTS : OWN_BEYOND_SKIRTS;
      return band < edge.band || (isSettled && density > share * edge.densityBelow);
    }),
  );
}

/**
 * Lets the floors of all octaves leave out what cannot be watched.
 * @param settledSamples from the beginning of the recording on, which filters have to forget.
 */
export function watchBesideEdges(
  octaves: readonly OctaveBand[],
  floors: readonly OctaveFloor[],
  settledSamples: number,
): void {
  const rising = octaves.map((octave, k) => ({ octave, floor: floors[k]! })).reverse();
  const isWatchable = watchableSubBands(
    rising.flatMap(({ octave, floor }) => {
      const widthHz = (octave.highHz - octave.lowHz) / BANDS_PER_OCTAVE;
      return Array.from(floor.levels, (level, leaf) => ({
        lowHz: octave.lowHz + leaf * widthHz,
        highHz: octave.lowHz + (leaf + 1) * widthHz,
        density: level / octave.gain,
        isSettled: settledSamples >= SETTLING_CELLS * octave.samplesPerCell,
      }));
    }),
  );
  for (const [k, { floor }] of rising.entries())
    floor.watch((leaf) => isWatchable[k * BANDS_PER_OCTAVE + leaf]!);
}

function findEdges(bands: readonly SubBandNoise[]): Edge[] {
  const edges: Edge[] = [];
  for (let band = 1; band + 1 < bands.length; band++) {
    const { lowHz, highHz } = bands[band]!;
    const falls = bands[band - 1]!.density > LEAST_FALL * bands[band + 1]!.density;
    if (!falls || lowHz < LOWEST_EDGE_HZ) continue;
    const under = risingDensities(bands.slice(Math.max(0, band - BANDS_BELOW), band));
    const over = risingDensities(bands.slice(band + 1, band + 1 + BANDS_ABOVE));
    const densityBelow = under[Math.min(1, under.length - 1)]!;
    if (densityBelow > LEAST_FALL * over[Math.max(0, over.length - 2)]!)
      edges.push({ band, highHz, densityBelow });
  }
  return edges;
}

function risingDensities(bands: readonly SubBandNoise[]): number[] {
  return bands.map(({ density }) => density).sort((a, b) => a - b);
}
