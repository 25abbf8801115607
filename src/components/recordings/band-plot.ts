import type uPlot from 'uplot';
import type { BandLevel } from '@shared/contract/measurement.ts';
import { frequencyAxis, roundRange, valueAxis } from '@/components/recordings/plot-axes.ts';
import { drawGrounds, drawLines } from '@/components/recordings/spectrum-marks.ts';
import type { SpectrumLimits } from '@/components/recordings/spectrum-marks.ts';
import type { PlotSize } from '@/components/recordings/usePlot.ts';
import { formatDecibels, formatFrequency } from '@/composables/useFormat.ts';
import type { Palette } from '@/theme/palette.ts';

export const bandSeries = [
  { key: 'floorDb', name: 'floor', meaning: 'what nine frames of ten exceed' },
  { key: 'medianDb', name: 'median', meaning: 'half of the frames' },
  { key: 'meanDb', name: 'mean', meaning: 'mean power' },
  { key: 'maximumDb', name: 'maximum', meaning: 'the loudest frame' },
] as const satisfies readonly { key: keyof BandLevel; name: string; meaning: string }[];

/** Nominal mid-band frequencies of a decade. Source: IEC 61260-1:2014, Annex E, from memory. */
const nominal = [1, 1.25, 1.6, 2, 2.5, 3.15, 4, 5, 6.3, 8];

/** The name of a band by its exact mid-band frequency: 1 584.9 Hz is called 1.6 kHz. */
export function nameOfBand({ middleHz }: Pick<BandLevel, 'middleHz'>): string {
  const place = Math.round(10 * Math.log10(middleHz));
  return formatFrequency((nominal[((place % 10) + 10) % 10] ?? 1) * 10 ** Math.floor(place / 10));
}

const levelStepDb = 20;
const [emptyLowDb, emptyHighDb] = [-120, -40];

/** Mid-band frequencies, and the levels of each series. */
export function bandData(bands: readonly BandLevel[]): uPlot.AlignedData {
  return [
    bands.map(({ middleHz }) => middleHz),
    ...bandSeries.map(({ key }) => bands.map((band) => band[key])),
  ];
}

/** The plot in one sentence, for whoever does not see it. */
export function bandSentence(bands: readonly BandLevel[]): string {
  const told = bands.flatMap(({ middleHz, floorDb }) => (floorDb === null ? [] : [{ middleHz, floorDb }]));
  const loudest = told.reduce<(typeof told)[number] | null>(
    (most, band) => (!most || band.floorDb > most.floorDb ? band : most),
    null,
  );
  if (!loudest) return 'Noise floor by third octaves: nothing to show.';
  const range = `${nameOfBand(bands[0] ?? loudest)} to ${nameOfBand(bands.at(-1) ?? loudest)}`;
  return `Noise floor by third octaves from ${range}; highest at ${nameOfBand(loudest)} with ${formatDecibels(loudest.floorDb)} re full scale.`;
}

function strokes({ inkQuiet, ink, melt, edge }: Palette): string[] {
  return [inkQuiet, ink, melt, edge];
}

const dashes: readonly number[][] = [[], [6, 3], [2, 3], [10, 3, 2, 3]];

export function bandOptions(
  data: uPlot.AlignedData,
  bands: readonly BandLevel[],
  limits: SpectrumLimits,
  onPoint: (index: number | null) => void,
) {
  const levels = data.slice(1).flatMap((row) => [...row].filter((value) => typeof value === 'number'));
  const [low, high] =
    levels.length > 0 ? [Math.min(...levels), Math.max(...levels)] : [emptyLowDb, emptyHighDb];
  const range = roundRange(low, high, levelStepDb);
  const hz = [bands[0]?.lowHz ?? 1, bands.at(-1)?.highHz ?? 10] as const;
  return (palette: Palette, size: PlotSize): uPlot.Options => ({
    ...size,
    padding: [22, 36, 0, 0],
    legend: { show: false },
    cursor: { drag: { x: false, y: false }, points: { show: false }, y: false },
    scales: { x: { time: false, distr: 3, range: () => [...hz] }, y: { range: () => range } },
    axes: [frequencyAxis(palette, ...hz), valueAxis(palette, 'dB re full scale')],
    series: [
      {},
      ...bandSeries.map((_series, index) => ({
        stroke: strokes(palette)[index]!,
        dash: dashes[index]!,
        width: index === 0 ? 1.6 : 1.2,
        points: { show: index === 0, size: 5, fill: palette.inkQuiet },
        ...(index === 0 ? { fill: `${palette.inkQuiet}22`, fillTo: range[0] } : {}),
      })),
    ],
    hooks: {
      drawClear: [(plot) => drawGrounds(plot, palette, limits)],
      draw: [(plot) => drawLines(plot, palette, limits)],
      setCursor: [(plot) => onPoint(plot.cursor.idx ?? null)],
    },
  });
}
