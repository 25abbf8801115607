import { candidateSortSchema, hearingClassSchema } from '@shared/contract/candidates.ts';
import type { CandidateFilters, CandidateSort, HearingClass } from '@shared/contract/candidates.ts';
import { formatFrequency, formatNumber, formatSeconds } from '@/composables/useFormat.ts';

/** Names in the address of the page: an order, and filters in the units in which people type them. */
export const addressNames = [
  'order',
  'hearing',
  'channel',
  'snr',
  'low',
  'high',
  'from',
  'to',
  'row',
] as const;
export type AddressName = (typeof addressNames)[number];
export type CandidateAddress = Readonly<Record<AddressName, string>>;

export interface CandidateChoice {
  hearingClass: HearingClass | null;
  channel: number | null;
  leastSnrDb: number | null;
  lowKHz: number | null;
  highKHz: number | null;
  fromS: number | null;
  toS: number | null;
}

export const noChoice: CandidateChoice = {
  hearingClass: null,
  channel: null,
  leastSnrDb: null,
  lowKHz: null,
  highKHz: null,
  fromS: null,
  toS: null,
};

function numberIn(text: string, low: number, high: number): number | null {
  const value = Number(text);
  return text !== '' && Number.isFinite(value) && value >= low && value <= high ? value : null;
}

const mostKHz = 20_000;
const mostS = 1e8;
const mostDb = 200;

/** What cannot be understood in an address counts as not chosen. */
export function readChoice(address: CandidateAddress): CandidateChoice {
  const channel = numberIn(address.channel, 0, 63);
  return {
    hearingClass: hearingClassSchema.safeParse(address.hearing).data ?? null,
    channel: channel !== null && Number.isInteger(channel) ? channel : null,
    leastSnrDb: numberIn(address.snr, -mostDb, mostDb),
    lowKHz: numberIn(address.low, 0, mostKHz),
    highKHz: numberIn(address.high, 0, mostKHz),
    fromS: numberIn(address.from, 0, mostS),
    toS: numberIn(address.to, 0, mostS),
  };
}

export function readSort(address: CandidateAddress): CandidateSort {
  return candidateSortSchema.safeParse(address.order).data ?? 'onset';
}

export function readRow(address: CandidateAddress): number | null {
  const row = numberIn(address.row, 1, Number.MAX_SAFE_INTEGER);
  return row !== null && Number.isInteger(row) ? row - 1 : null;
}

function textOf(value: string | number | null): string {
  return value === null ? '' : String(value);
}

export function writeChoice(choice: CandidateChoice): Partial<CandidateAddress> {
  return {
    hearing: textOf(choice.hearingClass),
    channel: textOf(choice.channel),
    snr: textOf(choice.leastSnrDb),
    low: textOf(choice.lowKHz),
    high: textOf(choice.highKHz),
    from: textOf(choice.fromS),
    to: textOf(choice.toS),
  };
}

/** As the server takes them: hertz and samples. */
export function toFilters(choice: CandidateChoice, sampleRateHz: number): CandidateFilters {
  const { hearingClass, channel, leastSnrDb, lowKHz, highKHz, fromS, toS } = choice;
  return {
    ...(hearingClass === null ? {} : { hearingClass }),
    ...(channel === null ? {} : { channel }),
    ...(leastSnrDb === null ? {} : { leastSnrDb }),
    ...(lowKHz === null ? {} : { lowHz: lowKHz * 1000 }),
    ...(highKHz === null ? {} : { highHz: highKHz * 1000 }),
    ...(fromS === null ? {} : { startSample: Math.floor(fromS * sampleRateHz) }),
    ...(toS === null ? {} : { endSample: Math.ceil(toS * sampleRateHz) }),
  };
}

const classWords: Readonly<Record<HearingClass, string>> = {
  above: 'above the hearing line',
  across: 'across the hearing line',
  below: 'below the hearing line',
  unknown: 'of which the place to the hearing line is unknown',
};

function rangeWords(
  low: number | null,
  high: number | null,
  format: (value: number) => string,
): string | null {
  if (low !== null && high !== null) return `from ${format(low)} to ${format(high)}`;
  if (low !== null) return `from ${format(low)}`;
  return high === null ? null : `up to ${format(high)}`;
}

const secondsDecimals = 3;

/** Each filter in words, in the order of the fields. */
export function choiceWords(choice: CandidateChoice): string[] {
  const { hearingClass, channel, leastSnrDb, lowKHz, highKHz, fromS, toS } = choice;
  const frequency = rangeWords(lowKHz, highKHz, (kHz) => formatFrequency(kHz * 1000, 5));
  const time = rangeWords(fromS, toS, (seconds) => formatSeconds(seconds, secondsDecimals));
  return [
    hearingClass === null ? null : classWords[hearingClass],
    channel === null ? null : `channel ${channel}`,
    leastSnrDb === null ? null : `at least ${formatNumber(leastSnrDb)}\u00A0dB over noise`,
    frequency === null ? null : `peak frequency ${frequency}`,
    time === null ? null : `in time ${time}`,
  ].filter((words) => words !== null);
}
