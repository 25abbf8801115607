import type uPlot from 'uplot';
import type { AxisTick } from '@/composables/bench/time-axis.ts';
import { formatFrequency, formatNumber } from '@/composables/useFormat.ts';
import type { Palette } from '@/theme/palette.ts';
import { fontFigures, fontText } from '@/theme/tokens.ts';

export const figureFont = `11px ${fontFigures}`;
export const labelFont = `600 12px ${fontText}`;

/** A tick closer to the end than this factor would run into the one at the end. */
const leastRatio = 2.2;

/** Ticks of a logarithmic axis of frequency: the decades and the end; 20 kHz is drawn as a line of its own. */
export function frequencyTicks(lowHz: number, highHz: number): number[] {
  const ticks: number[] = [];
  for (let hz = 10 ** Math.ceil(Math.log10(lowHz)); hz * leastRatio <= highHz; hz *= 10) ticks.push(hz);
  return [...ticks, highHz];
}

export function frequencyAxis(palette: Palette, lowHz: number, highHz: number): uPlot.Axis {
  return {
    stroke: palette.inkQuiet,
    font: figureFont,
    grid: { show: false },
    ticks: { stroke: palette.hairline, width: 1, size: 4 },
    splits: () => frequencyTicks(lowHz, highHz),
    // The library keeps only powers of ten of a logarithmic axis unless told otherwise.
    filter: (_plot, splits) => splits,
    values: (_plot, splits) => splits.map((hz) => formatFrequency(hz)),
    size: 30,
  };
}

/** Places in time under a plot; the library's own steps run into each other in a recording of a few samples. */
export function timeAxis(palette: Palette, ticks: readonly AxisTick[], isShown: boolean): uPlot.Axis {
  return {
    show: isShown,
    stroke: palette.inkQuiet,
    font: figureFont,
    grid: { show: false },
    ticks: { stroke: palette.hairline, width: 1, size: 4 },
    splits: () => ticks.map(({ value }) => value),
    values: () => ticks.map(({ label }) => label),
    size: 28,
  };
}

/** Values without a label beside them. */
export function figureAxis(palette: Palette, size: number): uPlot.Axis {
  return {
    stroke: palette.inkQuiet,
    font: figureFont,
    grid: { stroke: palette.hairline, width: 1 },
    ticks: { show: false },
    values: (_plot, splits) => splits.map((value) => formatNumber(value)),
    size,
  };
}

export function valueAxis(palette: Palette, label: string): uPlot.Axis {
  return { ...figureAxis(palette, 46), label, labelFont: figureFont, labelSize: 18, labelGap: 2 };
}

/** Room to the next round step, so that a curve does not touch the frame. */
export function roundRange(low: number, high: number, step: number): [number, number] {
  // Adding zero turns the minus zero of a range that ends there into zero.
  return [Math.floor(low / step) * step + 0, Math.ceil(high / step) * step + 0];
}
