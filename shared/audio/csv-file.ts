import { decodeText } from '../lib/byte-text.ts';
import type { AudioFormat } from './audio-format.ts';
import type { ByteSource } from './byte-source.ts';
import { csvDialect, csvRow, type CsvDialect } from './csv-table.ts';
import type { CsvLayout } from './declared-layout.ts';
import { metadataField, presentFields, type MetadataField } from './metadata-field.ts';
import { RefusedFileError } from './refused-file-error.ts';
import { frequencyText } from './unit-text.ts';

export const MAX_CSV_BYTES = 1024 * 1024 * 1024;
const HEAD_BYTES = 64 * 1024;
const PIECE_BYTES = 1024 * 1024;
const MAX_RATE_HZ = 20_000_000;
const SECONDS: Record<CsvLayout['timeUnit'], number> = { s: 1, ms: 1e-3, us: 1e-6, ns: 1e-9 };
const NEWLINE = 10;
/** A millionth: less than clocks of recorders are off. */
const MOST_ROUNDING = 1e-6;

export type CsvFile = {
  format: AudioFormat;
  metadata: MetadataField[];
  dialect: CsvDialect;
  /** As the times make it; the format holds whole hertz. */
  exactRateHz: number;
};

/**
 * Reads the first and the last lines of a table and counts the lines between them. That every line holds numbers is found out when
 * they are taken. Throws RefusedFileError.
 */
export async function readCsvFile(source: ByteSource, layout: CsvLayout): Promise<CsvFile> {
  if (source.sizeBytes > MAX_CSV_BYTES) {
    throw new RefusedFileError(
      'layout',
      'The table is larger than 1 GiB. Save so long a recording as WAV, as FLAC or as raw samples.',
    );
  }
  const head = await source.read(0, HEAD_BYTES);
  if (head.includes(0)) throw new RefusedFileError('layout', 'This file is no table in plain text.');
  const lines = wholeLines(decodeText(head), source.sizeBytes > head.length);
  const dialect = csvDialect(lines, layout);
  const last = await lastLine(source);
  const frames = (await countNewlines(source, last.offset)) + 1 - dialect.preamble.length;
  const exactRateHz = layout.sampleRateHz ?? rateOf(layout, { lines, last: last.text, dialect, frames });
  const samples = { encoding: 'float', bitsPerSample: 64, channels: layout.valueColumns.length } as const;
  const format: AudioFormat = {
    container: 'CSV',
    ...samples,
    sampleRateHz: Math.round(exactRateHz),
    frames,
    extensible: false,
    warnings: roundingWarnings(exactRateHz),
  };
  return { format, metadata: preambleFields(dialect), dialect, exactRateHz };
}

function wholeLines(text: string, isCut: boolean): string[] {
  const lines = text.split(/\r?\n/);
  return isCut ? lines.slice(0, -1) : lines;
}

/** The last line that is not blank, and where it begins. */
async function lastLine(source: ByteSource): Promise<{ text: string; offset: number }> {
  const start = Math.max(0, source.sizeBytes - HEAD_BYTES);
  const tail = await source.read(start, source.sizeBytes - start);
  let end = tail.length;
  while (end > 0 && tail[end - 1]! <= 0x20) end--;
  const begin = tail.lastIndexOf(NEWLINE, Math.max(0, end - 1)) + 1;
  return { text: decodeText(tail.subarray(begin, end)), offset: start + begin };
}

async function countNewlines(source: ByteSource, endOffset: number): Promise<number> {
  let count = 0;
  for (let at = 0; at < endOffset; at += PIECE_BYTES) {
    const piece = await source.read(at, Math.min(PIECE_BYTES, endOffset - at));
    for (let n = piece.indexOf(NEWLINE); n >= 0; n = piece.indexOf(NEWLINE, n + 1)) count++;
  }
  return count;
}

type Rows = { lines: readonly string[]; last: string; dialect: CsvDialect; frames: number };

function rateOf(layout: CsvLayout, { lines, last, dialect, frames }: Rows): number {
  const first = csvRow(lines[dialect.preamble.length] ?? '', dialect, layout)?.[0] ?? Number.NaN;
  const final = csvRow(last, dialect, layout)?.[0] ?? Number.NaN;
  const rateHz = (frames - 1) / ((final - first) * SECONDS[layout.timeUnit]);
  if (Math.round(rateHz) >= 1 && Math.round(rateHz) <= MAX_RATE_HZ) return rateHz;
  throw new RefusedFileError(
    'rate',
    `The times of the table give no sample rate from 1 Hz to ${frequencyText(MAX_RATE_HZ)}: it has ${frames} rows from ${first} to ${final} ${layout.timeUnit}.`,
  );
}

function roundingWarnings(exactRateHz: number): string[] {
  const rateHz = Math.round(exactRateHz);
  if (Math.abs(exactRateHz - rateHz) <= MOST_ROUNDING * rateHz) return [];
  const shown = Number(exactRateHz.toPrecision(8));
  return [`The times of the table make ${shown} samples per second; ${rateHz} were taken.`];
}

/** Seconds of the unit of the column of times. */
export function timeUnitSeconds({ timeUnit }: CsvLayout): number {
  return SECONDS[timeUnit];
}

/** The lines above the numbers, but for the titles of the columns right above them. */
function preambleFields({ preamble, delimiter }: CsvDialect): MetadataField[] {
  return presentFields(
    preamble.map((line, n) => {
      const isTitles = n === preamble.length - 1 && line.split(delimiter).length > 1;
      return isTitles ? undefined : metadataField('CSV', `line ${n + 1}`, line);
    }),
  );
}
