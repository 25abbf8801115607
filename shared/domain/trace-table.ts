import {
  cellsOfLine,
  hasDecimalComma,
  instantOfCell,
  numberOfCell,
  type CellInstant,
  type TraceColumns,
} from './trace-cells.ts';
import { tableNotes } from './trace-notes.ts';

export const maximumTraceBytes = 50_000_000;
export const maximumTraceRows = 5_000_000;
const LONGEST_LINE = 100_000;
const SECONDS = { s: 1, ms: 1e-3, us: 1e-6, min: 60, iso: 1 } as const;
/** More rows without a value than this share are another column, or another table. */
const MOST_MISSING = 0.5;

/** Why a table is no trace, in a sentence; `line` counts from 1. */
export class TraceTableError extends Error {
  readonly line: number | null;

  constructor(message: string, line: number | null = null) {
    super(message);
    this.name = 'TraceTableError';
    this.line = line;
  }
}

export interface ReadTrace {
  /** Seconds since the first row, never falling. */
  timesS: Float64Array;
  values: Float64Array;
  preambleLines: number;
  /** Of the first row, where the times are instants with a zone. */
  firstInstantMs: number | null;
  /** What a person should know of it: gaps, rows left out. */
  notes: string[];
}

/** Takes a table line by line and makes a trace of it. Memory: 16 bytes a row. */
export class TraceReader {
  readonly #columns: TraceColumns;
  readonly #mostRows: number;
  #lines = 0;
  #preambleLines = 0;
  #cells = 0;
  #rows = 0;
  #points = 0;
  #timesS = new Float64Array(1024);
  #values = new Float64Array(1024);
  #first: CellInstant | number | null = null;
  #lastTimeS = 0;
  #missing = { count: 0, firstLine: 0, firstText: '' };
  #sawDecimalComma = false;

  constructor(columns: TraceColumns, mostRows = maximumTraceRows) {
    this.#columns = columns;
    this.#mostRows = mostRows;
  }

  get rows(): number {
    return this.#rows;
  }

  /** @throws TraceTableError with the line */
  take(text: string): void {
    this.#lines++;
    const line = this.#lines === 1 ? withoutMark(text) : text;
    if (line.length > LONGEST_LINE || line.includes('\0'))
      throw new TraceTableError('This file is no table in plain text. Save it as CSV in UTF-8.');
    if (line.trim() === '') return;
    const cells = cellsOfLine(line, this.#columns.separator);
    if (this.#rows === 0) this.#begin(cells);
    else this.#takeRow(cells);
  }

  /** @throws TraceTableError where there are no two rows of numbers */
  finish(): ReadTrace {
    if (this.#rows === 0) throw this.#noNumbers();
    if (this.#missing.count > MOST_MISSING * this.#rows) throw this.#noValues();
    const timesS = this.#timesS.slice(0, this.#points);
    const values = this.#values.slice(0, this.#points);
    if (this.#points < 2)
      throw new TraceTableError('A trace needs at least two rows of numbers; this has one.');
    if (timesS.at(-1) === 0)
      throw new TraceTableError('All rows have the same time. Choose the column of times, or its unit.');
    return {
      timesS,
      values,
      preambleLines: this.#preambleLines,
      firstInstantMs: this.#firstInstantMs(),
      notes: tableNotes(timesS, this.#missing),
    };
  }

  /** Lines before the first row of numbers are titles and remarks. */
  #begin(cells: string[]): void {
    const timed = this.#timeOf(cells[this.#columns.timeColumn] ?? '');
    const value = this.#valueOf(cells);
    if (timed !== null && !Number.isNaN(value)) {
      this.#first = timed;
      this.#cells = cells.length;
      this.#preambleLines = this.#lines - 1;
      this.#add(0, value);
      return;
    }
    const { timeColumn, valueColumn } = this.#columns;
    this.#sawDecimalComma ||= [timeColumn, valueColumn].some((column) =>
      hasDecimalComma(cells[column] ?? ''),
    );
  }

  #takeRow(cells: string[]): void {
    if (cells.length < this.#cells && this.#isCut(cells)) throw this.#mixed(cells.length);
    const time = this.#timeOf(cells[this.#columns.timeColumn]!);
    if (time === null) throw this.#noTime(cells[this.#columns.timeColumn]!);
    const timeS = this.#sinceFirst(time);
    if (timeS < this.#lastTimeS) throw this.#backwards(timeS);
    this.#lastTimeS = timeS;
    const value = this.#valueOf(cells);
    if (Number.isNaN(value)) this.#leaveOut(cells[this.#columns.valueColumn]!);
    else this.#add(timeS, value);
  }

  #isCut(cells: string[]): boolean {
    return cells.length <= Math.max(this.#columns.timeColumn, this.#columns.valueColumn);
  }

  #timeOf(cell: string): CellInstant | number | null {
    if (this.#columns.timeUnit === 'iso') return instantOfCell(cell);
    const number = numberOfCell(cell, this.#columns.decimal);
    return Number.isNaN(number) ? null : number;
  }

  #valueOf(cells: string[]): number {
    return numberOfCell(cells[this.#columns.valueColumn] ?? '', this.#columns.decimal);
  }

  #sinceFirst(time: CellInstant | number): number {
    const first = this.#first;
    if (typeof time === 'number')
      return (time - (typeof first === 'number' ? first : 0)) * SECONDS[this.#columns.timeUnit];
    if (first === null || typeof first === 'number') return 0;
    return time.seconds - first.seconds + (time.fraction - first.fraction);
  }

  #leaveOut(text: string): void {
    this.#rows++;
    if (this.#missing.count++ > 0) return;
    this.#missing.firstLine = this.#lines;
    this.#missing.firstText = text;
  }

  #add(timeS: number, value: number): void {
    if (++this.#rows > this.#mostRows)
      throw new TraceTableError(`The table has more than ${this.#mostRows.toLocaleString('en')} rows.`);
    if (this.#points === this.#timesS.length) {
      this.#timesS = grown(this.#timesS);
      this.#values = grown(this.#values);
    }
    this.#timesS[this.#points] = timeS;
    this.#values[this.#points++] = value;
  }

  #firstInstantMs(): number | null {
    const first = this.#first;
    if (first === null || typeof first === 'number' || !first.hasZone) return null;
    return Math.round((first.seconds + first.fraction) * 1000);
  }

  #noNumbers(): TraceTableError {
    if (this.#sawDecimalComma && this.#columns.decimal === 'point')
      return new TraceTableError(
        'The numbers of this table have decimal commas (0,5). Choose the decimal comma, or save it with points.',
      );
    const { timeColumn, valueColumn, timeUnit } = this.#columns;
    const time = timeUnit === 'iso' ? 'an ISO date and time' : 'a number';
    return new TraceTableError(
      `No line of this table has ${time} in column ${timeColumn + 1} and a number in column ${valueColumn + 1}.`,
    );
  }

  #noValues(): TraceTableError {
    const { count } = this.#missing;
    return new TraceTableError(
      `Column ${this.#columns.valueColumn + 1} holds no number in ${count.toLocaleString('en')} of ${this.#rows.toLocaleString('en')} rows. Choose another column.`,
    );
  }

  #mixed(cells: number): TraceTableError {
    return new TraceTableError(
      `Line ${this.#lineText()} has ${cells} ${cells === 1 ? 'cell' : 'cells'} where the lines before it have ${this.#cells}. Save the table with one separator throughout.`,
      this.#lines,
    );
  }

  #noTime(cell: string): TraceTableError {
    const shown = cell.slice(0, 40);
    return new TraceTableError(
      `Line ${this.#lineText()} has "${shown}" where its time should be. Take out lines that are no rows of the table.`,
      this.#lines,
    );
  }

  #backwards(timeS: number): TraceTableError {
    const [from, to] = [this.#lastTimeS, timeS].map((seconds) => Number(seconds.toPrecision(7)));
    return new TraceTableError(
      `Line ${this.#lineText()} goes back in time, from ${from} s to ${to} s after the first row. Bring in what lies before and after it as two traces.`,
      this.#lines,
    );
  }

  #lineText(): string {
    return this.#lines.toLocaleString('en');
  }
}

/** Cuts text that comes in pieces into lines. */
export class LineCutter {
  #rest = '';

  push(piece: string, take: (line: string) => void): void {
    const lines = (this.#rest + piece).split('\n');
    this.#rest = lines.pop() ?? '';
    if (this.#rest.length > LONGEST_LINE)
      throw new TraceTableError('This file is no table in plain text. Save it as CSV in UTF-8.');
    for (const line of lines) take(line.endsWith('\r') ? line.slice(0, -1) : line);
  }

  finish(take: (line: string) => void): void {
    if (this.#rest !== '') take(this.#rest);
    this.#rest = '';
  }
}

function grown(array: Float64Array<ArrayBuffer>): Float64Array<ArrayBuffer> {
  const wider = new Float64Array(array.length * 2);
  wider.set(array);
  return wider;
}

/** A byte order mark, also one that was read as Latin-1. */
function withoutMark(line: string): string {
  return line.replace(/^(\uFEFF|\u00EF\u00BB\u00BF)/, '');
}
