import type uPlot from 'uplot';
import type { Course } from '@shared/contract/measurement.ts';
import type { TimeMark } from '@/components/recordings/finding-places.ts';
import { figureAxis, roundRange, timeAxis } from '@/components/recordings/plot-axes.ts';
import type { PlotSize } from '@/components/recordings/usePlot.ts';
import { timeTicks } from '@/composables/bench/time-axis.ts';
import type { AxisTick } from '@/composables/bench/time-axis.ts';
import { formatDuration, formatNumber } from '@/composables/useFormat.ts';
import type { Palette } from '@/theme/palette.ts';

export interface CourseSeries {
  key: 'level' | 'ultrasonic' | 'candidates';
  label: string;
  /** The plot in one sentence, for whoever does not see it. */
  sentence: string;
  values: readonly (number | null)[];
}

const levelFloorSpanDb = 60;
/** Least distance of two labels on the axis of time. */
const tickDistancePx = 80;

function strongest(values: readonly (number | null)[]): { index: number; value: number } | null {
  let best: { index: number; value: number } | null = null;
  for (const [index, value] of values.entries()) {
    if (value !== null && (!best || value > best.value)) best = { index, value };
  }
  return best;
}

function sentenceOf(name: string, unit: string, values: readonly (number | null)[], stepS: number): string {
  const peak = strongest(values);
  if (!peak) return `${name}: nothing to show.`;
  const figure = `${formatNumber(peak.value, { maximumFractionDigits: 0 })}\u00A0${unit}`;
  return `${name} through the recording; highest at ${formatDuration(peak.index * stepS)} with ${figure}.`;
}

interface CourseFacts {
  sampleRateHz: number;
  /** A level above 20 kHz where nothing can be observed there would be one of nothing. */
  hasUltrasound: boolean;
}

/** What can be shown of the course: withheld or empty rows are left out. */
export function courseSeries(course: Course, { sampleRateHz, hasUltrasound }: CourseFacts): CourseSeries[] {
  const stepS = course.samplesPerStep / sampleRateHz;
  const all: CourseSeries[] = [
    {
      key: 'level',
      label: 'Level, dB',
      sentence: sentenceOf('Level', 'dB', course.levelDb, stepS),
      values: course.levelDb,
    },
    {
      key: 'ultrasonic',
      label: 'Above 20\u00A0kHz, dB',
      sentence: sentenceOf('Level above 20 kHz', 'dB', course.ultrasonicDb, stepS),
      values: course.ultrasonicDb,
    },
    {
      key: 'candidates',
      label: 'Candidates',
      sentence: sentenceOf('Candidates per step', 'candidates', course.candidates, stepS),
      values: course.candidates,
    },
  ];
  return all
    .filter(({ key }) => key !== 'ultrasonic' || hasUltrasound)
    .filter(({ values }) => values.some((value) => value !== null));
}

/** Middles of the steps in seconds, and the values. */
export function courseData(series: CourseSeries, stepS: number): uPlot.AlignedData {
  return [series.values.map((_value, index) => (index + 0.5) * stepS), [...series.values]];
}

export function rangeOf(series: CourseSeries): [number, number] {
  const present = series.values.filter((value) => value !== null);
  const high = Math.max(...present);
  if (series.key === 'candidates') return [0, Math.max(1, high)];
  const low = Math.max(Math.min(...present), high - levelFloorSpanDb);
  return roundRange(low, high + 1, 10);
}

function strokeOf(series: CourseSeries, palette: Palette): string {
  if (series.key === 'candidates') return palette.fracture;
  return series.key === 'ultrasonic' ? palette.melt : palette.inkQuiet;
}

function markColourOf(series: CourseSeries, palette: Palette): string {
  return series.key === 'candidates' ? palette.ink : palette.glowFill;
}

/** Places in seconds, as on the bench: a clock where the recording is long. */
export function secondTicks(durationS: number, widthPx: number): AxisTick[] {
  const inSeconds = { startSample: 0, endSample: durationS };
  return timeTicks(inSeconds, { sampleRateHz: 1, widthPx, distancePx: tickDistancePx });
}

interface CourseLook {
  series: CourseSeries;
  durationS: number;
  /** The axis of time is drawn under the last plot only. */
  hasTimeAxis: boolean;
  /** Places of findings, or active spans over the candidates, drawn along the top. */
  marks: readonly TimeMark[];
  onPoint: (index: number | null) => void;
}

const markHeight = 5;
const leastMarkWidth = 3;

function drawMarks(plot: uPlot, colour: string, marks: readonly TimeMark[]): void {
  const { top } = plot.bbox;
  plot.ctx.fillStyle = colour;
  for (const { fromS, toS } of marks) {
    const [from, to] = [plot.valToPos(fromS, 'x', true), plot.valToPos(toS, 'x', true)];
    const width = Math.max(leastMarkWidth * devicePixelRatio, to - from);
    plot.ctx.fillRect(from, top, width, markHeight * devicePixelRatio);
  }
}

export function courseOptions({ series, durationS, hasTimeAxis, marks, onPoint }: CourseLook) {
  const [low, high] = rangeOf(series);
  return (palette: Palette, size: PlotSize): uPlot.Options => {
    const ticks = secondTicks(durationS, size.width);
    return {
      ...size,
      padding: [6, 12, hasTimeAxis ? 0 : 4, 0],
      legend: { show: false },
      cursor: { drag: { x: false, y: false }, points: { show: false }, y: false, sync: { key: 'course' } },
      scales: { x: { time: false, range: () => [0, durationS] }, y: { range: () => [low, high] } },
      axes: [
        timeAxis(palette, ticks, hasTimeAxis),
        { ...figureAxis(palette, 46), splits: () => [low, high] },
      ],
      series: [
        {},
        {
          stroke: strokeOf(series, palette),
          fill: `${strokeOf(series, palette)}55`,
          width: 1.2,
          fillTo: low,
          points: { show: false },
        },
      ],
      hooks: {
        draw: [(plot) => drawMarks(plot, markColourOf(series, palette), marks)],
        setCursor: [(plot) => onPoint(plot.cursor.idx ?? null)],
      },
    };
  };
}
