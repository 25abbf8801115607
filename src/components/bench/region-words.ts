import type { RegionFigures, RegionReport } from '@shared/contract/region.ts';
import {
  formatDecibels,
  formatDuration,
  formatFrequency,
  formatNumber,
  formatShare,
} from '@/composables/useFormat.ts';

export interface RegionRow {
  key: string;
  term: string;
  /** The unit or reference, where the value does not carry it. */
  title?: string;
  region: string;
  quiet: string;
}

interface Quantity {
  key: keyof RegionFigures & string;
  term: string;
  /** In tables for other programs. */
  unit: string;
  title?: string;
  valueOf: (figures: RegionFigures) => number | null;
  say: (value: number | null) => string;
}

const QUANTITIES: readonly Quantity[] = [
  {
    key: 'durationS',
    term: 'Duration',
    unit: 's',
    valueOf: ({ durationS }) => durationS,
    say: (value) => formatDuration(value, 4),
  },
  {
    key: 'rmsDb',
    term: 'RMS',
    unit: 'dB re full scale',
    title: 'dB re full scale, without the mean; a full-scale sine has 0 dB',
    valueOf: ({ rmsDb }) => rmsDb,
    say: (value) => formatDecibels(value),
  },
  {
    key: 'peakDb',
    term: 'Peak',
    unit: 'dB re full scale',
    title: 'dB re full scale, the largest magnitude as recorded',
    valueOf: ({ peakDb }) => peakDb,
    say: (value) => formatDecibels(value),
  },
  {
    key: 'crestDb',
    term: 'Crest',
    unit: 'dB',
    title: 'Peak over RMS; a sine has 3.0 dB',
    valueOf: ({ crestDb }) => crestDb,
    say: (value) => formatDecibels(value),
  },
  {
    key: 'shareAbove20kHz',
    term: 'Above 20 kHz',
    unit: '1',
    title: 'Share of the energy, as this sensor sees it',
    valueOf: ({ shareAbove20kHz }) => shareAbove20kHz,
    say: (value) => formatShare(value),
  },
  {
    key: 'peakFrequencyHz',
    term: 'Peak frequency',
    unit: 'Hz',
    valueOf: ({ peakFrequencyHz }) => peakFrequencyHz,
    say: (value) => formatFrequency(value, 4),
  },
  {
    key: 'centroidHz',
    term: 'Centroid',
    unit: 'Hz',
    title: 'Mean frequency of the power',
    valueOf: ({ centroidHz }) => centroidHz,
    say: (value) => formatFrequency(value, 4),
  },
];

export function regionRows({ region, quiet }: RegionReport): RegionRow[] {
  return QUANTITIES.map(({ key, term, title, valueOf, say }) => ({
    key,
    term,
    ...(title ? { title } : {}),
    region: say(valueOf(region)),
    quiet: say(quiet && valueOf(quiet)),
  }));
}

/** How the spectrum was made: "Mean of 13 frames of 4 096 samples (Welch), lines 46.9 Hz apart". */
export function methodWords({ region }: RegionReport): string {
  const { spectrum } = region;
  if (!spectrum) return 'Too short for a spectrum: it takes eight samples.';
  const { method, averages, frameSamples, binHz } = spectrum;
  const samples = `${formatNumber(frameSamples)} samples`;
  const how =
    method === 'welch'
      ? `Mean of ${formatNumber(averages)} Hann frames of ${samples} that overlap by half (Welch)`
      : `A single Hann frame of ${samples}: its lines scatter widely`;
  return `${how}, lines ${formatFrequency(binHz)} apart.`;
}

const SPECTRUM_UNIT = 'dB re full scale squared per Hz';

/** One tidy table: a row for each quantity and each line of the spectra. Numbers alone, so no cell can be a formula. */
export function regionCsv(report: RegionReport): string {
  const { region, quiet } = report;
  const cell = (value: number | null | undefined) => value ?? '';
  const figures = QUANTITIES.map(({ key, unit, valueOf }) => [
    key,
    '',
    unit,
    cell(valueOf(region)),
    cell(quiet && valueOf(quiet)),
  ]);
  const binHz = region.spectrum?.binHz ?? 0;
  const lines = (region.spectrum?.densityDbPerHz ?? []).map((level, index) => [
    'density',
    (index + 1) * binHz,
    SPECTRUM_UNIT,
    level,
    cell(quiet?.spectrum?.densityDbPerHz[index]),
  ]);
  const places = [
    ['channel', '', '', report.channel, report.channel],
    ['startSample', '', '', region.startSample, cell(quiet?.startSample)],
    ['endSample', '', '', region.endSample, cell(quiet?.endSample)],
  ];
  const head = ['quantity', 'frequencyHz', 'unit', 'region', 'quiet'];
  return [head, ...places, ...figures, ...lines].map((row) => `${row.join(',')}\r\n`).join('');
}
