import type uPlot from 'uplot';
import { figureAxis, timeAxis } from '@/components/recordings/plot-axes.ts';
import type { PlotSize } from '@/components/recordings/usePlot.ts';
import { timeTicks } from '@/composables/bench/time-axis.ts';
import type { PlotSpan } from '@/composables/runs/trace-range.ts';
import type { Palette } from '@/theme/palette.ts';

interface TraceLook {
  range: PlotSpan;
  /** Where there are recordings, drawn along the bottom. */
  spans: readonly PlotSpan[];
  /** Onsets that are offered, drawn as upright lines. */
  onsetsS: readonly number[];
  hasTimeAxis: boolean;
  onPoint: (index: number | null) => void;
}

const tickDistancePx = 90;
const bandHeight = 5;

/** Labels of a run's clock: whole seconds and more also below zero. */
function ticksOf({ fromS, toS }: PlotSpan, widthPx: number) {
  const window = { startSample: fromS, endSample: toS };
  return timeTicks(window, { sampleRateHz: 1, widthPx, distancePx: tickDistancePx }).map(
    ({ value, label }) => ({
      value,
      label: value < 0 ? `\u2212${positiveLabel(-value, { fromS, toS }, widthPx)}` : label,
    }),
  );
}

function positiveLabel(value: number, { fromS, toS }: PlotSpan, widthPx: number): string {
  const window = { startSample: value, endSample: value + (toS - fromS) };
  return timeTicks(window, { sampleRateHz: 1, widthPx, distancePx: tickDistancePx })[0]?.label ?? '';
}

function drawBeside(plot: uPlot, palette: Palette, { spans, onsetsS }: TraceLook): void {
  const { top, height, left, width } = plot.bbox;
  const ratio = devicePixelRatio;
  const at = (timeS: number) => Math.min(left + width, Math.max(left, plot.valToPos(timeS, 'x', true)));
  plot.ctx.fillStyle = palette.ink;
  for (const { fromS, toS } of spans)
    plot.ctx.fillRect(
      at(fromS),
      top + height - bandHeight * ratio,
      Math.max(2 * ratio, at(toS) - at(fromS)),
      bandHeight * ratio,
    );
  plot.ctx.fillStyle = palette.glowFill;
  for (const onsetS of onsetsS) plot.ctx.fillRect(at(onsetS) - ratio, top, 2 * ratio, height);
}

export function traceOptions(look: TraceLook) {
  const { range, hasTimeAxis, onPoint } = look;
  return (palette: Palette, size: PlotSize): uPlot.Options => {
    const ticks = ticksOf(range, size.width);
    return {
      ...size,
      padding: [8, 12, hasTimeAxis ? 0 : 4, 0],
      legend: { show: false },
      cursor: { drag: { x: false, y: false }, points: { show: false }, y: false, sync: { key: 'traces' } },
      scales: { x: { time: false, range: () => [range.fromS, range.toS] } },
      axes: [timeAxis(palette, ticks, hasTimeAxis), { ...figureAxis(palette, 54), space: 24 }],
      series: [{}, { stroke: palette.melt, width: 1.4, points: { show: false } }],
      hooks: {
        draw: [(plot) => drawBeside(plot, palette, look)],
        setCursor: [(plot) => onPoint(plot.cursor.idx ?? null)],
      },
    };
  };
}
