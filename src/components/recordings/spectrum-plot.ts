import type uPlot from 'uplot';
import type { Spectrum } from '@shared/contract/measurement.ts';
import { frequencyAxis, roundRange, valueAxis } from '@/components/recordings/plot-axes.ts';
import { drawGrounds, drawLabel, drawLines } from '@/components/recordings/spectrum-marks.ts';
import type { SpectrumLimits } from '@/components/recordings/spectrum-marks.ts';
import type { PlotSize } from '@/components/recordings/usePlot.ts';
import { formatFrequency } from '@/composables/useFormat.ts';
import type { Palette } from '@/theme/palette.ts';

/** Curves in the order of the plot's series, after the frequencies. */
export const spectrumCurves = ['quiet', 'active', 'median', 'mean', 'maximum'] as const;
export type SpectrumCurve = (typeof spectrumCurves)[number];

const levelStepDb = 20;
/** Over the highest peak, for the name of its curve. */
const labelRoomDb = 6;
/** Below this the deep end of a spectrum says nothing of what anybody looks for. */
const deepestDb = -200;

export function levelsOf(spectrum: Spectrum): Record<SpectrumCurve, readonly number[] | null> {
  return {
    quiet: spectrum.quietDbPerHz,
    active: spectrum.activeDbPerHz,
    median: spectrum.medianDbPerHz,
    mean: spectrum.meanDbPerHz,
    maximum: spectrum.maximumDbPerHz,
  };
}

/** Curves that this spectrum has: without active time there is none of it, and old views have no median and mean. */
export function curvesOf(spectrum: Spectrum): SpectrumCurve[] {
  const levels = levelsOf(spectrum);
  return spectrumCurves.filter((curve) => (levels[curve]?.length ?? 0) > 0);
}

/** Frequencies that a logarithmic axis can show, with the levels of each curve. */
export function spectrumData(spectrum: Spectrum): uPlot.AlignedData {
  const first = spectrum.frequenciesHz.findIndex((hz) => hz > 0);
  const frequencies = spectrum.frequenciesHz.slice(first);
  const levels = levelsOf(spectrum);
  const rows = spectrumCurves.map((curve) => {
    const values = levels[curve];
    if (!values || values.length === 0) return frequencies.map(() => null);
    return values.slice(first).map((db) => Math.max(deepestDb, db));
  });
  return [frequencies, ...rows];
}

function extentOf(
  data: uPlot.AlignedData,
  shown: readonly SpectrumCurve[],
): { hz: [number, number]; db: [number, number] } {
  const [hz, ...rows] = data;
  const visible = rows.filter((_row, index) => shown.includes(spectrumCurves[index]!));
  const all = visible.flatMap((row) => [...row]).filter((value) => typeof value === 'number');
  const [low, high] = all.length > 0 ? [Math.min(...all), Math.max(...all)] : [-120, -40];
  return {
    hz: [hz[0] ?? 1, hz[hz.length - 1] ?? 10],
    db: roundRange(low, high + labelRoomDb, levelStepDb),
  };
}

export interface SpectrumLook {
  limits: SpectrumLimits;
  shown: readonly SpectrumCurve[];
  onPoint: (index: number | null) => void;
}

function strokeOf(curve: SpectrumCurve, palette: Palette): string {
  const strokes = {
    quiet: palette.inkQuiet,
    active: palette.fracture,
    median: palette.ink,
    mean: palette.melt,
    maximum: palette.edge,
  };
  return strokes[curve];
}

/** Told apart by their dashes as well as by their colours. */
const dashes: Readonly<Record<SpectrumCurve, number[]>> = {
  quiet: [],
  active: [],
  median: [6, 3],
  mean: [2, 3],
  maximum: [10, 3, 2, 3],
};

/** Options of the plot: power densities over frequency, with what limits the view and the hearing line. */
export function spectrumOptions(data: uPlot.AlignedData, { limits, shown, onPoint }: SpectrumLook) {
  const { hz, db } = extentOf(data, shown);
  return (palette: Palette, size: PlotSize): uPlot.Options => ({
    ...size,
    padding: [22, 36, 0, 0],
    legend: { show: false },
    cursor: { drag: { x: false, y: false }, points: { show: false }, y: false },
    scales: {
      x: { time: false, distr: 3, range: () => hz },
      y: { range: () => db },
    },
    axes: [frequencyAxis(palette, ...hz), valueAxis(palette, 'dB re full scale² per Hz')],
    series: [
      {},
      ...spectrumCurves.map((curve) => ({
        show: shown.includes(curve),
        stroke: strokeOf(curve, palette),
        width: curve === 'active' ? 1.4 : 1.2,
        dash: dashes[curve],
        points: { show: false },
      })),
    ],
    hooks: {
      drawClear: [(plot) => drawGrounds(plot, palette, limits)],
      draw: [(plot) => drawLines(plot, palette, limits), (plot) => drawNames(plot, palette, shown)],
      setCursor: [(plot) => onPoint(plot.cursor.idx ?? null)],
    },
  });
}

/** Index at which the active curve stands highest over the quiet one; null without an active one. */
export function widestGap(data: uPlot.AlignedData): number | null {
  const [, quiet = [], active = []] = data;
  let best: { index: number; gap: number } | null = null;
  for (const [index, level] of active.entries()) {
    const below = quiet[index];
    if (typeof level !== 'number' || typeof below !== 'number') continue;
    if (!best || level - below > best.gap) best = { index, gap: level - below };
  }
  return best?.index ?? null;
}

/** Share of the axis at which the name of a curve stands, and on which side of it. */
const namePlaces: Readonly<Record<SpectrumCurve, { share: number; side: 1 | -1 }>> = {
  quiet: { share: 0.3, side: 1 },
  active: { share: 0.5, side: -1 },
  median: { share: 0.12, side: 1 },
  mean: { share: 0.2, side: -1 },
  maximum: { share: 0.4, side: -1 },
};

function drawNames(plot: uPlot, palette: Palette, shown: readonly SpectrumCurve[]): void {
  const [hz, ...rows] = plot.data;
  const last = hz.length - 1;
  const offset = 14 * devicePixelRatio;
  plot.ctx.save();
  for (const curve of shown) {
    const { share, side } = namePlaces[curve];
    // Where the active curve stands clear of the quiet one, its name has room.
    const index = (curve === 'active' ? widestGap(plot.data) : null) ?? Math.round(last * share);
    const level = rows[spectrumCurves.indexOf(curve)]?.[index];
    if (typeof level !== 'number') continue;
    const x = plot.valToPos(hz[index] ?? 1, 'x', true);
    const y = Math.max(plot.bbox.top + offset, plot.valToPos(level, 'y', true) + side * offset);
    const edge = 40 * devicePixelRatio;
    const kept = Math.min(plot.bbox.left + plot.bbox.width - edge, Math.max(plot.bbox.left + edge, x));
    const colour = curve === 'maximum' ? palette.inkQuiet : strokeOf(curve, palette);
    drawLabel(plot, palette, { text: curve, x: kept, y, colour, align: 'center' });
  }
  plot.ctx.restore();
}

/** The plot in one sentence, for whoever does not see it. */
export function spectrumSentence(spectrum: Spectrum): string {
  const data = spectrumData(spectrum);
  const index = widestGap(data);
  const [hz, quiet = [], active = []] = data;
  if (index === null) return 'Power density of the quiet time over frequency; there is no active time.';
  const gapDb = Number(active[index]) - Number(quiet[index]);
  return `Power density over frequency while quiet and while active. The active time stands highest over the quiet at ${formatFrequency(hz[index])}, by ${gapDb.toFixed(0)} dB.`;
}
