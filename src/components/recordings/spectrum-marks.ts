import type uPlot from 'uplot';
import type { Recording } from '@shared/contract/recordings.ts';
import { labelFont } from '@/components/recordings/plot-axes.ts';
import type { Palette } from '@/theme/palette.ts';

export const hearingLineHz = 20_000;

export interface FrequencyBand {
  lowHz: number | null;
  highHz: number | null;
}

/** What limits the view of a recording, drawn with its spectrum. */
export interface SpectrumLimits {
  sensor: FrequencyBand;
  /** Where something above the hearing line can be observed; `null` where nothing can. */
  observable: { lowHz: number; highHz: number } | null;
  /** Where the noise floor itself ends; `null` where it does not. */
  floorEdgeHz: number | null;
}

/** As the measurement found them; without one, nothing but the sensor's band is known. */
export function limitsOf({
  sensorLowHz,
  sensorHighHz,
  measurement,
}: Pick<Recording, 'sensorLowHz' | 'sensorHighHz' | 'measurement'>): SpectrumLimits {
  const { bandLowHz = null, bandHighHz = null } = measurement?.ultrasonic ?? {};
  const isSeen = bandLowHz !== null && bandHighHz !== null;
  const bandwidth = measurement?.bandwidth;
  return {
    sensor: { lowHz: sensorLowHz, highHz: sensorHighHz },
    observable: isSeen ? { lowHz: bandLowHz, highHz: bandHighHz } : null,
    floorEdgeHz: bandwidth?.edge === 'brick-wall' ? bandwidth.effectiveHz : null,
  };
}

/** The band of the sensor as a ground, and the observable one as a bar at the foot: under the curves. */
export function drawGrounds(plot: uPlot, palette: Palette, { sensor, observable }: SpectrumLimits): void {
  const { top, height } = plot.bbox;
  if (sensor.lowHz !== null || sensor.highHz !== null) {
    fillBetween(plot, sensor, { colour: palette.tint, top, height });
  }
  if (observable) {
    const barHeight = 6 * devicePixelRatio;
    fillBetween(plot, observable, { colour: palette.melt, top: top + height - barHeight, height: barHeight });
  }
}

interface Fill {
  colour: string;
  top: number;
  height: number;
}

function fillBetween(plot: uPlot, { lowHz, highHz }: FrequencyBand, { colour, top, height }: Fill): void {
  const { left, width } = plot.bbox;
  const place = (hz: number) => Math.min(left + width, Math.max(left, plot.valToPos(hz, 'x', true)));
  const from = lowHz === null || lowHz <= 0 ? left : place(lowHz);
  const to = highHz === null ? left + width : place(highHz);
  plot.ctx.fillStyle = colour;
  plot.ctx.fillRect(from, top, to - from, height);
}

function scaledFont(): string {
  return labelFont.replace(/(\d+)px/, (_whole, px: string) => `${Number(px) * devicePixelRatio}px`);
}

export interface Label {
  text: string;
  x: number;
  y: number;
  colour: string;
  align: CanvasTextAlign;
}

/** Text over curves, with the ground around it so that it can be read. */
export function drawLabel(plot: uPlot, palette: Palette, { text, x, y, colour, align }: Label): void {
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

interface FrequencyLine {
  hz: number;
  text: string;
  /** Of the line and of its name. */
  colours: { line: string; text: string };
  dash: number[];
  /** Rows under the top of the plot, so that two names near each other stay apart; -1 is over it. */
  row: number;
}

function drawLine(plot: uPlot, palette: Palette, { hz, text, colours, dash, row }: FrequencyLine): void {
  const { left, width, top, height } = plot.bbox;
  const x = plot.valToPos(hz, 'x', true);
  if (x < left || x > left + width) return;
  const { ctx } = plot;
  ctx.save();
  ctx.strokeStyle = colours.line;
  ctx.lineWidth = 2 * devicePixelRatio;
  ctx.setLineDash(dash.map((length) => length * devicePixelRatio));
  ctx.beginPath();
  ctx.moveTo(x, top);
  ctx.lineTo(x, top + height);
  ctx.stroke();
  ctx.setLineDash([]);
  const y = top + (row < 0 ? -10 : 12 + 16 * row) * devicePixelRatio;
  const align = row < 0 ? 'center' : 'right';
  const shift = row < 0 ? 0 : 6 * devicePixelRatio;
  drawLabel(plot, palette, { text, x: x - shift, y, colour: colours.text, align });
  ctx.restore();
}

/** The hearing line, and where the floor ends: over the curves. */
export function drawLines(plot: uPlot, palette: Palette, { floorEdgeHz }: SpectrumLimits): void {
  const hearing = { line: palette.glowFill, text: palette.glow };
  drawLine(plot, palette, {
    ...{ hz: hearingLineHz, text: 'hearing line', colours: hearing },
    ...{ dash: [], row: -1 },
  });
  if (floorEdgeHz === null) return;
  const edge = { line: palette.ink, text: palette.ink };
  drawLine(plot, palette, { hz: floorEdgeHz, text: 'floor ends', colours: edge, dash: [5, 4], row: 0 });
}
