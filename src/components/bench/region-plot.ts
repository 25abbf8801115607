import type uPlot from 'uplot';
import type { RegionReport } from '@shared/contract/region.ts';
import { HEARING_LINE_HZ } from '@/composables/bench/hearing-line.ts';
import { frequencyAxis, roundRange, valueAxis } from '@/components/recordings/plot-axes.ts';
import type { PlotSize } from '@/components/recordings/usePlot.ts';
import type { Palette } from '@/theme/palette.ts';

const STEP_DB = 20;

/** Frequencies, the region, the quiet; spectra of other lines than the region's are left out. */
export function regionData({ region, quiet }: RegionReport): uPlot.AlignedData {
  const { spectrum } = region;
  const hz = (spectrum?.densityDbPerHz ?? []).map((_, line) => (line + 1) * (spectrum?.binHz ?? 0));
  const isAlike = quiet?.spectrum?.binHz === spectrum?.binHz;
  const below = isAlike ? (quiet?.spectrum?.densityDbPerHz ?? []) : [];
  return [hz, spectrum?.densityDbPerHz ?? [], hz.map((_, line) => below[line] ?? null)];
}

function rangeOf(data: uPlot.AlignedData): [number, number] {
  const values = data.slice(1).flatMap((row) => [...row].filter((value) => typeof value === 'number'));
  return values.length > 0 ? roundRange(Math.min(...values), Math.max(...values), STEP_DB) : [-120, -40];
}

/** Power densities over a logarithmic axis of frequency, with the hearing line. */
export function regionPlotOptions(data: uPlot.AlignedData, onPoint: (index: number | null) => void) {
  const [hz] = data;
  const ends: [number, number] = [hz[0] ?? 1, hz.at(-1) ?? 10];
  const range = rangeOf(data);
  return (palette: Palette, size: PlotSize): uPlot.Options => ({
    ...size,
    padding: [8, 30, 0, 0],
    legend: { show: false },
    cursor: { drag: { x: false, y: false }, points: { show: false }, y: false },
    scales: { x: { time: false, distr: 3, range: () => ends }, y: { range: () => range } },
    axes: [frequencyAxis(palette, ...ends), valueAxis(palette, 'dB re FS² per Hz')],
    series: [
      {},
      { stroke: palette.fracture, width: 1.4, points: { show: false } },
      { stroke: palette.inkQuiet, width: 1.2, dash: [5, 3], points: { show: false } },
    ],
    hooks: {
      draw: [(plot) => drawHearingLine(plot, palette)],
      setCursor: [(plot) => onPoint(plot.cursor.idx ?? null)],
    },
  });
}

function drawHearingLine(plot: uPlot, palette: Palette): void {
  const x = plot.valToPos(HEARING_LINE_HZ, 'x', true);
  const { left, top, width, height } = plot.bbox;
  if (x <= left || x >= left + width) return;
  plot.ctx.fillStyle = palette.glowFill;
  plot.ctx.fillRect(x - 1, top, 2, height);
}
