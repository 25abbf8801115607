import type { EventClass } from '@shared/contract/schemes.ts';
import { burstFigures, peakUnit } from '@/components/bench/burst-figures.ts';
import type { BenchMark } from '@/composables/bench/mark.ts';
import { classGlyph, classTitle, timeFigure } from '@/composables/bench/mark-words.ts';
import { onsetFigure, uncertaintyFigure } from '@/composables/bench/marking/onset-words.ts';
import { formatDuration, formatNumber } from '@/composables/useFormat.ts';

/** A fact of a mark as the table tells it. */
export interface MarkColumn {
  key: string;
  head: string;
  /** What the heading means, where it is short. */
  title?: string;
  widthPx: number;
  isFigure?: boolean;
  text: (mark: BenchMark) => string;
  /** `null` stands last, whichever way the table is sorted. */
  order: (mark: BenchMark) => number | string | null;
}

export interface MarkColumnParts {
  classes: readonly EventClass[];
  sampleRateHz: number;
  channels: number;
  marks: readonly BenchMark[];
}

const CERTAINTY = { sure: 0, probable: 1, unsure: 2 } as const;

/** Every fact of a mark: the table is the picture in words. */
export function markColumns(parts: MarkColumnParts): MarkColumn[] {
  return [...saidColumns(parts), ...measuredColumns(parts), ...placeColumns(parts), ...storyColumns()];
}

function saidColumns({ classes, sampleRateHz }: MarkColumnParts): MarkColumn[] {
  return [
    {
      key: 'onset',
      head: 'Onset, s',
      widthPx: 148,
      isFigure: true,
      text: (mark) =>
        `${onsetFigure(mark, sampleRateHz).replace(/\u00A0s$/, '')} ${uncertaintyFigure(mark, sampleRateHz)}`.trim(),
      order: ({ startSample }) => startSample,
    },
    {
      key: 'class',
      head: 'Class',
      widthPx: 112,
      text: ({ classKey }) => `${classGlyph(classKey, classes)} ${classTitle(classKey, classes)}`,
      order: ({ classKey }) => classes.findIndex(({ key }) => key === classKey),
    },
    {
      key: 'confidence',
      head: 'Confidence',
      widthPx: 82,
      text: ({ confidence }) => confidence,
      order: ({ confidence }) => CERTAINTY[confidence],
    },
  ];
}

function measuredColumns({ marks }: MarkColumnParts): MarkColumn[] {
  const unit = peakUnit(marks.slice(0, 50).map(({ parameters }) => parameters));
  return [
    {
      key: 'peak',
      head: unit,
      title: 'Peak',
      widthPx: 62,
      isFigure: true,
      text: ({ parameters }) => burstFigures(parameters).peak,
      order: ({ parameters }) => parameters?.peakDbAe ?? parameters?.peakDb ?? null,
    },
    {
      key: 'frequency',
      head: 'kHz',
      title: 'Peak frequency',
      widthPx: 54,
      isFigure: true,
      text: ({ parameters }) => burstFigures(parameters).frequency,
      order: ({ parameters }) => parameters?.peakFrequencyHz ?? null,
    },
    {
      key: 'share',
      head: '% above',
      title: 'Share of the energy above 20 kHz',
      widthPx: 62,
      isFigure: true,
      text: ({ parameters }) => burstFigures(parameters).share,
      order: ({ parameters }) => parameters?.ultrasonicShare ?? null,
    },
  ];
}

function placeColumns({ sampleRateHz, channels }: MarkColumnParts): MarkColumn[] {
  const channel: MarkColumn = {
    key: 'channel',
    head: 'Channel',
    widthPx: 64,
    isFigure: true,
    text: (mark) => formatNumber(mark.channel + 1),
    order: (mark) => mark.channel,
  };
  return [
    {
      key: 'lasts',
      head: 'Lasts',
      widthPx: 76,
      isFigure: true,
      text: (mark) => formatDuration((mark.endSample - mark.startSample) / sampleRateHz),
      order: (mark) => mark.endSample - mark.startSample,
    },
    {
      key: 'end',
      head: 'End, s',
      widthPx: 98,
      isFigure: true,
      text: ({ endSample }) => timeFigure(endSample, sampleRateHz),
      order: ({ endSample }) => endSample,
    },
    {
      key: 'band',
      head: 'Band, kHz',
      widthPx: 98,
      isFigure: true,
      text: bandText,
      order: ({ lowHz }) => lowHz,
    },
    ...(channels > 1 ? [channel] : []),
  ];
}

function bandText({ lowHz, highHz }: BenchMark): string {
  if (lowHz === null && highHz === null) return 'any';
  const edge = (hz: number) => formatNumber(hz / 1000, { maximumSignificantDigits: 4 });
  if (highHz === null) return `from ${edge(lowHz ?? 0)}`;
  return lowHz === null ? `to ${edge(highHz)}` : `${edge(lowHz)} to ${edge(highHz)}`;
}

function storyColumns(): MarkColumn[] {
  return [
    {
      key: 'origin',
      head: 'Set',
      widthPx: 116,
      text: originText,
      order: originText,
    },
    { key: 'note', head: 'Note', widthPx: 180, text: ({ note }) => note, order: ({ note }) => note || null },
  ];
}

function originText({ origin, rawStartSample, isOwn }: BenchMark): string {
  const how = origin === 'candidate' ? 'candidate' : rawStartSample === null ? 'by hand' : 'picked onset';
  return isOwn ? how : `${how}, not mine`;
}
