import type uPlot from 'uplot';
import type { Spectrum } from '@shared/contract/measurement.ts';
import { frequencyAxis, labelFont, roundRange, valueAxis } from '@/components/recordings/plot-axes.ts';
import type { PlotSize } from '@/components/recordings/usePlot.ts';
import { formatFrequency } from '@/composables/useFormat.ts';
import type { Palette } from '@/theme/palette.ts';

export const hearingLineHz = 20_000;
const levelStepDb = 20;
/** Over the highest peak, for the name of its curve. */
const labelRoomDb = 6;
/** Below this the deep end of a spectrum says nothing of what anybody looks for. */
const deepestDb = -200;

export interface SensorBand {
  lowHz: number | null;
  highHz: number | null;
}

/** Frequencies that a logarithmic axis can show, with their levels. */
export function spectrumData(spectrum: Spectrum): uPlot.AlignedData {
  const first = spectrum.frequenciesHz.findIndex((hz) => hz > 0);
  const floored = (levels: readonly number[]) => levels.slice(first).map((db) => Math.max(deepestDb, db));
  const active = spectrum.activeDbPerHz;
  return [
    spectrum.frequenciesHz.slice(first),
    floored(spectrum.quietDbPerHz),
    active ? floored(active) : spectrum.frequenciesHz.slice(first).map(() => null),
  ];
}

function extentOf(data: uPlot.AlignedData): { hz: [number, number]; db: [number, number] } {
  const [hz, ...levels] = data;
  const all = levels.flatMap((row) => [...row]).filter((value) => typeof value === 'number');
  return {
    hz: [hz[0] ?? 1, hz[hz.length - 1] ?? 10],
    db: roundRange(Math.min(...all), Math.max(...all) + labelRoomDb, levelStepDb),
  };
}

/** Options of the plot: quiet and active power density over frequency, with the sensor's band and the hearing line. */
export function spectrumOptions(
  data: uPlot.AlignedData,
  band: SensorBand,
  onPoint: (index: number | null) => void,
) {
  const { hz, db } = extentOf(data);
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
      { stroke: palette.inkQuiet, width: 1.2, points: { show: false } },
      { stroke: palette.fracture, width: 1.4, points: { show: false } },
    ],
    hooks: {
      drawClear: [(plot) => drawBand(plot, palette, band)],
      draw: [(plot) => drawHearingLine(plot, palette), (plot) => drawNames(plot, palette)],
      setCursor: [(plot) => onPoint(plot.cursor.idx ?? null)],
    },
  });
}

function drawBand(plot: uPlot, palette: Palette, { lowHz, highHz }: SensorBand): void {
  if (lowHz === null && highHz === null) return;
  const { left, width, top, height } = plot.bbox;
  const place = (hz: number) => Math.min(left + width, Math.max(left, plot.valToPos(hz, 'x', true)));
  const from = lowHz === null || lowHz <= 0 ? left : place(lowHz);
  const to = highHz === null ? left + width : place(highHz);
  plot.ctx.fillStyle = palette.tint;
  plot.ctx.fillRect(from, top, to - from, height);
}

function scaledFont(): string {
  return labelFont.replace(/(\d+)px/, (_whole, px: string) => `${Number(px) * devicePixelRatio}px`);
}

interface Label {
  text: string;
  x: number;
  y: number;
  colour: string;
  align: CanvasTextAlign;
}

/** Text over curves, with the ground around it so that it can be read. */
function drawLabel(plot: uPlot, palette: Palette, { text, x, y, colour, align }: Label): void {
  const { ctx } = plot;
  ctx.font = scaledFont();
  ctx.textAlign = align;
  ctx.textBaseline = 'middle';
  ctx.lineJoin = 'round';
  ctx.lineWidth = 4 * devicePixelRatio;
  ctx.strokeStyle = palette.paper;
  ctx.strokeText(text, x, y);
  ctx.fillStyle = colour;
  ctx.fillText(text, x, y);
}

function drawHearingLine(plot: uPlot, palette: Palette): void {
  const { left, width, top, height } = plot.bbox;
  const x = plot.valToPos(hearingLineHz, 'x', true);
  if (x < left || x > left + width) return;
  const { ctx } = plot;
  ctx.save();
  ctx.fillStyle = palette.glowFill;
  ctx.fillRect(x - devicePixelRatio, top, 2 * devicePixelRatio, height);
  const y = top - 10 * devicePixelRatio;
  drawLabel(plot, palette, { text: 'hearing line', x, y, colour: palette.glow, align: 'center' });
  ctx.restore();
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

function drawNames(plot: uPlot, palette: Palette): void {
  const [hz, quiet = [], active = []] = plot.data;
  const last = hz.length - 1;
  const gapIndex = widestGap(plot.data);
  const quietIndex = Math.round(last * 0.3);
  const offset = 14 * devicePixelRatio;
  const nameAt = (text: string, index: number, level: unknown, colour: string, shift: number) => {
    if (typeof level !== 'number') return;
    const x = plot.valToPos(hz[index] ?? 1, 'x', true);
    const y = Math.max(plot.bbox.top + offset, plot.valToPos(level, 'y', true) + shift);
    const edge = 40 * devicePixelRatio;
    const kept = Math.min(plot.bbox.left + plot.bbox.width - edge, Math.max(plot.bbox.left + edge, x));
    drawLabel(plot, palette, { text, x: kept, y, colour, align: 'center' });
  };
  plot.ctx.save();
  nameAt('quiet', quietIndex, quiet[quietIndex], palette.inkQuiet, offset);
  if (gapIndex !== null) nameAt('active', gapIndex, active[gapIndex], palette.fracture, -offset);
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
