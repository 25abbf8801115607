import type { CsvLayout } from './declared-layout.ts';
import { RefusedFileError } from './refused-file-error.ts';

/** How the lines of a table come apart, found in its first lines. */
export type CsvDialect = {
  delimiter: string | RegExp;
  /** Lines before the numbers. */
  preamble: string[];
};

type Columns = Pick<CsvLayout, 'timeColumn' | 'valueColumns'>;

/** A semicolon or a tab is tried before the comma, which may be a decimal one then. */
const DELIMITERS: (string | RegExp)[] = [';', '\t', ',', '|', /\s+/];
const NO_NUMBER = /^[-+]?(nan|inf|infinity|-)?$/i;
const DECIMAL_COMMA = /^\s*[-+]?\d+,\d+(e[-+]?\d+)?\s*$/i;

/** Finds delimiter and first row of numbers. Throws RefusedFileError with what is wrong where no line has numbers where they were declared. */
export function csvDialect(lines: readonly string[], columns: Columns): CsvDialect {
  for (const delimiter of DELIMITERS) {
    const firstRow = lines.findIndex((line) => isNumberRow(cellsOf(line, delimiter), columns));
    if (firstRow >= 0) return { delimiter, preamble: lines.slice(0, firstRow) };
  }
  throw noNumbers(lines, columns);
}

/**
 * The numbers of one line in the order `time, values...`, or the values alone where there is no column of times. A cell that is empty
 * or says nan or inf is not a number; `undefined` where a cell is missing or holds words.
 */
export function csvRow(line: string, { delimiter }: CsvDialect, columns: Columns): number[] | undefined {
  const cells = cellsOf(line, delimiter);
  const row: number[] = [];
  for (const column of declaredColumns(columns)) {
    const number = cellNumber(cells[column]);
    if (number === undefined) return undefined;
    row.push(number);
  }
  return row;
}

function declaredColumns({ timeColumn, valueColumns }: Columns): number[] {
  return timeColumn === null ? valueColumns : [timeColumn, ...valueColumns];
}

function cellsOf(line: string, delimiter: string | RegExp): string[] {
  return typeof delimiter === 'string' ? line.split(delimiter) : line.trim().split(delimiter);
}

function cellNumber(cell: string | undefined): number | undefined {
  const text = cell?.replaceAll('"', '').trim();
  if (text === undefined) return undefined;
  if (NO_NUMBER.test(text)) return Number.NaN;
  const number = Number(text);
  return Number.isNaN(number) ? undefined : number;
}

function isNumberRow(cells: readonly string[], columns: Columns): boolean {
  return declaredColumns(columns).every((column) => Number.isFinite(cellNumber(cells[column])));
}

function noNumbers(lines: readonly string[], columns: Columns): RefusedFileError {
  const hasCommas = [';', '\t', '|', /\s+/].some((delimiter) =>
    lines.some((line) => {
      const cells = cellsOf(line, delimiter);
      return declaredColumns(columns).every((column) => DECIMAL_COMMA.test(cells[column] ?? ''));
    }),
  );
  const message = hasCommas
    ? 'The numbers of this table have decimal commas (0,5). Save it with decimal points (0.5).'
    : `No line of this table has a number in each of the declared columns (${declaredColumns(columns).join(', ')}, counted from 0).`;
  return new RefusedFileError('layout', message);
}
