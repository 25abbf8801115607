import type { Bandwidth } from '../../shared/contract/measurement.ts';
import { frequencyText } from '../../shared/audio/unit-text.ts';

/** The noise floor of a channel: densities over rising frequencies at equal steps. */
export interface FloorSpectrum {
  sampleRateHz: number;
  frequenciesHz: readonly number[];
  /** Median over time, so that what sounds now and then is no floor. */
  floorDbPerHz: readonly number[];
}

/** A fall of the floor by this much within a twelfth of an octave is a filter or a codec, not a sensor. */
const LEAST_DROP_DB = 12;
/** The edge lies where the floor has fallen by this much: half-way down to digital silence would be far out on its skirt. */
const EDGE_FALL_DB = 10;
/** Over the top of the transition the floor must stay down, up to Nyquist. */
const STAYS_DOWN_DB = 9;
const LOWEST_EDGE_HZ = 2000;
/** The filter of any converter falls here; an edge above tells nothing. */
const HIGHEST_EDGE_OF_RATE = 0.45;
/** Below this there is no noise to judge by: digital silence, or the rounding of the transform. */
const LEAST_FLOOR_DB = -185;
const EDGE_RESOLUTION_HZ = 100;
const TRANSITION = 2 ** (1 / 24);
const NEIGHBOURHOOD = 2 ** (1 / 4);
const LOSSY_HZ = { low: 15_000, high: 20_600 };
const OLDER_RATES_HZ = [
  8000, 11_025, 16_000, 22_050, 32_000, 44_100, 48_000, 88_200, 96_000, 176_400, 192_000,
];

/**
 * Highest frequency up to which a recording can show anything: the brick-wall edge of its noise floor, or Nyquist.
 *
 * At every frequency f from 2 kHz to 0.45 fs the median density of the quarter octave under f 2^(-1/24) is compared
 * with that over f 2^(1/24). The edge is where the difference is greatest, if it is at least 12 dB and nothing above
 * comes within 9 dB of the floor below. Content is no criterion: a quiet recording can still observe.
 *
 * Cost: some milliseconds. An empty or silent spectrum has no edge.
 */
export function findBandwidth(floor: FloorSpectrum): Bandwidth {
  const edgeHz = findEdgeHz(floor);
  if (edgeHz === undefined) {
    const nyquistHz = floor.sampleRateHz / 2;
    return {
      effectiveHz: nyquistHz,
      edge: 'none',
      reason: `The noise floor shows no edge: the sample rate alone sets the limit, ${frequencyText(nyquistHz)}.`,
    };
  }
  return { effectiveHz: edgeHz, edge: 'brick-wall', reason: edgeSentence(edgeHz, floor.sampleRateHz) };
}

function findEdgeHz(floor: FloorSpectrum): number | undefined {
  const { frequenciesHz, floorDbPerHz, sampleRateHz } = floor;
  const highestAbove = runningMaximumFromTop(floorDbPerHz);
  let best: { hz: number; dropDb: number } | undefined;
  for (const [index, hz] of frequenciesHz.entries()) {
    if (hz < LOWEST_EDGE_HZ || hz > HIGHEST_EDGE_OF_RATE * sampleRateHz) continue;
    const belowDb = medianBetween(floor, hz / NEIGHBOURHOOD, hz / TRANSITION);
    const aboveDb = medianBetween(floor, hz * TRANSITION, hz * NEIGHBOURHOOD);
    if (belowDb === undefined || aboveDb === undefined || belowDb < LEAST_FLOOR_DB) continue;
    const dropDb = belowDb - aboveDb;
    const restIndex = firstIndexFrom(frequenciesHz, hz * TRANSITION, index);
    const staysDown = highestAbove[restIndex]! <= belowDb - STAYS_DOWN_DB;
    if (dropDb >= LEAST_DROP_DB && staysDown && dropDb > (best?.dropDb ?? 0)) best = { hz, dropDb };
  }
  return best && refineEdge(floor, best.hz);
}

/** Where, around a coarse edge, the floor leaves the level below it: by 10 dB, or by half the fall where that is less. */
function refineEdge(floor: FloorSpectrum, coarseHz: number): number {
  const wide = TRANSITION * TRANSITION;
  const belowDb = medianBetween(floor, coarseHz / NEIGHBOURHOOD, coarseHz / wide);
  const aboveDb = medianBetween(floor, coarseHz * wide, coarseHz * NEIGHBOURHOOD);
  if (belowDb === undefined || aboveDb === undefined) return coarseHz;
  const edgeDb = belowDb - Math.min(EDGE_FALL_DB, (belowDb - aboveDb) / 2);
  const { frequenciesHz, floorDbPerHz } = floor;
  for (let i = frequenciesHz.length - 1; i > 0; i--) {
    if (frequenciesHz[i]! > coarseHz * wide) continue;
    if (floorDbPerHz[i]! >= edgeDb) return frequenciesHz[i]!;
  }
  return coarseHz;
}

/** A line of a machine above the edge is no floor: the maximum is taken of medians of three neighbours. */
function runningMaximumFromTop(values: readonly number[]): Float64Array {
  const maxima = new Float64Array(values.length);
  let highest = -Infinity;
  for (let i = values.length - 1; i >= 0; i--) {
    const three = [values[i - 1] ?? values[i]!, values[i]!, values[i + 1] ?? values[i]!].sort(
      (a, b) => a - b,
    );
    highest = Math.max(highest, three[1]!);
    maxima[i] = highest;
  }
  return maxima;
}

function medianBetween(floor: FloorSpectrum, lowHz: number, highHz: number): number | undefined {
  const { frequenciesHz, floorDbPerHz } = floor;
  const first = firstIndexFrom(frequenciesHz, lowHz, 0);
  const end = firstIndexFrom(frequenciesHz, highHz, first);
  if (end - first < 3) return undefined;
  const values = floorDbPerHz.slice(first, end).sort((a, b) => a - b);
  return values[values.length >> 1];
}

/** First index at or after `from` whose frequency is at least `hz`; the frequencies have equal steps. */
function firstIndexFrom(frequenciesHz: readonly number[], hz: number, from: number): number {
  const stepHz = frequenciesHz[1]! - frequenciesHz[0]!;
  const index = Math.ceil((hz - frequenciesHz[0]!) / stepHz - 1e-9);
  return Math.min(Math.max(index, from), frequenciesHz.length - 1);
}

/** What may have made an edge: lossy compression, conversion from an older sample rate, or a filter. */
export function causesOfEdge(
  edgeHz: number,
  sampleRateHz: number,
): { mayBeLossy: boolean; olderHz: number | undefined } {
  const olderHz = OLDER_RATES_HZ.find(
    (rateHz) => rateHz < sampleRateHz && edgeHz > 0.43 * rateHz && edgeHz <= 0.505 * rateHz,
  );
  return { mayBeLossy: edgeHz >= LOSSY_HZ.low && edgeHz <= LOSSY_HZ.high, olderHz };
}

/** The lines of a long frame lie about 100 Hz apart: no more digits than that. */
export function edgeText(edgeHz: number): string {
  return frequencyText(Math.round(edgeHz / EDGE_RESOLUTION_HZ) * EDGE_RESOLUTION_HZ);
}

function edgeSentence(edgeHz: number, sampleRateHz: number): string {
  const found = `The noise floor ends at ${edgeText(edgeHz)}, below the ${frequencyText(sampleRateHz / 2)} that the sample rate allows.`;
  const { mayBeLossy, olderHz } = causesOfEdge(edgeHz, sampleRateHz);
  if (mayBeLossy) {
    return `${found} Such an edge near 16 to 20 kHz is what lossy compression leaves${olderHz ? `, or conversion from ${frequencyText(olderHz)}` : ''}. Whatever sounded higher is gone.`;
  }
  if (olderHz) {
    return `${found} The file looks converted from a sample rate of ${frequencyText(olderHz)}. Nothing higher was recorded.`;
  }
  return `${found} A filter in the recorder or in a later step limits the band. Nothing higher was recorded.`;
}
