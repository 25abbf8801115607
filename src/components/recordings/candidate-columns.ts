import type { Candidate, CandidateSort, CandidateSortKey } from '@shared/contract/candidates.ts';
import { timeDecimals } from '@/composables/bench/time-axis.ts';
import { hearingWords } from '@/components/recordings/candidate-words.ts';
import {
  formatDecibels,
  formatDuration,
  formatFrequency,
  formatNumber,
  formatSeconds,
  formatShare,
} from '@/composables/useFormat.ts';

export interface CandidateColumn {
  key: string;
  label: string;
  /** Column of the list by which it can be ordered. */
  sortKey: CandidateSortKey | null;
  /** Least width of the column; what is left over is shared out alike. */
  widthPx: number;
  isFigure: boolean;
  text: (candidate: Candidate) => string;
  title?: (candidate: Candidate) => string | undefined;
}

/** On both sides of a row. */
const rowPaddingPx = 10;
const clippedTitle = 'It touches full scale: peak and energy are lower bounds.';
const lowerBound = '\u2265\u202F';

function bounded({ clipped }: Candidate, text: string): string {
  return clipped ? `${lowerBound}${text}` : text;
}

function energyDb({ energyFs2S }: Candidate): number | null {
  return energyFs2S > 0 ? 10 * Math.log10(energyFs2S) : null;
}

const channelColumn: CandidateColumn = {
  key: 'channel',
  label: 'Channel',
  sortKey: null,
  widthPx: 58,
  isFigure: true,
  text: ({ channel }) => formatNumber(channel),
};

/** What stands in a row beside the onset, which leads to the bench. */
export function candidateColumns(channels: number): CandidateColumn[] {
  return [
    {
      key: 'hearing',
      label: 'Hearing line',
      sortKey: 'hearingClass',
      widthPx: 64,
      isFigure: false,
      text: ({ hearingClass }) => hearingWords[hearingClass],
    },
    ...(channels > 1 ? [channelColumn] : []),
    {
      key: 'peak',
      label: 'Peak re full scale',
      sortKey: 'peakDb',
      widthPx: 82,
      isFigure: true,
      text: (candidate) => bounded(candidate, formatDecibels(candidate.peakDb)),
      title: ({ clipped }) => (clipped ? clippedTitle : undefined),
    },
    {
      key: 'snr',
      label: 'Over noise',
      sortKey: 'snrDb',
      widthPx: 74,
      isFigure: true,
      text: ({ snrDb }) => formatDecibels(snrDb),
    },
    {
      key: 'duration',
      label: 'Duration',
      sortKey: 'durationUs',
      widthPx: 72,
      isFigure: true,
      text: ({ durationUs }) => formatDuration(durationUs / 1e6),
    },
    {
      key: 'frequency',
      label: 'Peak frequency',
      sortKey: 'peakFrequencyHz',
      widthPx: 78,
      isFigure: true,
      text: ({ peakFrequencyHz }) => formatFrequency(peakFrequencyHz),
    },
    {
      key: 'energy',
      label: 'Energy re 1\u00A0FS\u00B2\u00A0s',
      sortKey: 'energyFs2S',
      widthPx: 84,
      isFigure: true,
      text: (candidate) => bounded(candidate, formatDecibels(energyDb(candidate))),
      title: ({ energyFs2S, clipped }) =>
        clipped ? clippedTitle : `${energyFs2S.toPrecision(3)} full scale squared times seconds`,
    },
    {
      key: 'share',
      label: 'Energy above 20\u00A0kHz',
      sortKey: 'ultrasonicShare',
      widthPx: 68,
      isFigure: true,
      text: ({ ultrasonicShare }) => formatShare(ultrasonicShare),
    },
  ];
}

const onsetWidthPx = 114;

/** With so many digits that two neighbouring samples differ. */
export function onsetText({ onsetS }: Candidate, sampleRateHz: number): string {
  return formatSeconds(onsetS, timeDecimals(sampleRateHz));
}

interface GridWidths {
  /** For `grid-template-columns`. */
  columns: string;
  leastPx: number;
}

/** Headings and rows share their widths without being one table. */
export function gridWidths(columns: readonly CandidateColumn[]): GridWidths {
  const widthsPx = [onsetWidthPx, ...columns.map(({ widthPx }) => widthPx)];
  return {
    columns: widthsPx.map((widthPx) => `minmax(0, ${widthPx}fr)`).join(' '),
    leastPx: widthsPx.reduce((sum, widthPx) => sum + widthPx, 2 * rowPaddingPx),
  };
}

/** What comes first where people press a heading: the strongest, the longest, the highest; in time and class the first. */
const risingFirst: readonly CandidateSortKey[] = ['onset', 'hearingClass'];

/** Pressed again, the order turns round. */
export function sortAfterPress(current: CandidateSort, key: CandidateSortKey): CandidateSort {
  if (current === key) return `-${key}`;
  if (current === `-${key}`) return key;
  return risingFirst.includes(key) ? key : `-${key}`;
}

export function ariaSortOf(
  current: CandidateSort,
  key: CandidateSortKey,
): 'ascending' | 'descending' | 'none' {
  if (current === key) return 'ascending';
  return current === `-${key}` ? 'descending' : 'none';
}
