import type { Spectrum } from '@shared/contract/measurement.ts';
import { levelsOf, spectrumCurves } from '@/components/recordings/spectrum-plot.ts';
import type { SpectrumCurve } from '@/components/recordings/spectrum-plot.ts';

export interface SpectrumRow {
  hz: number;
  levelsDb: Partial<Record<SpectrumCurve, number | null>>;
}

const steps = [1, 2, 5];

function roundFrequencies(lowHz: number, highHz: number): number[] {
  const all: number[] = [];
  for (let decade = 1; decade <= highHz; decade *= 10) for (const step of steps) all.push(step * decade);
  return all.filter((hz) => hz >= lowHz && hz <= highHz);
}

function nearestIndex(frequenciesHz: readonly number[], hz: number): number {
  const distance = (index: number) => Math.abs(Math.log((frequenciesHz[index] ?? 1) / hz));
  let best = frequenciesHz.findIndex((frequency) => frequency > 0);
  for (let index = best; index < frequenciesHz.length; index++) {
    if (distance(index) < distance(best)) best = index;
  }
  return best;
}

/** The spectrum at round frequencies (1, 2, 5 in each decade): the plot in figures, `null` where a curve is missing. */
export function spectrumRows(spectrum: Spectrum): SpectrumRow[] {
  const { frequenciesHz } = spectrum;
  const lowHz = frequenciesHz.find((hz) => hz > 0) ?? 1;
  const highHz = frequenciesHz.at(-1) ?? 0;
  return roundFrequencies(lowHz, highHz).map((hz) => {
    const index = nearestIndex(frequenciesHz, hz);
    const levelOf = (curve: SpectrumCurve) => levelsOf(spectrum)[curve]?.[index] ?? null;
    return { hz, levelsDb: Object.fromEntries(spectrumCurves.map((curve) => [curve, levelOf(curve)])) };
  });
}
