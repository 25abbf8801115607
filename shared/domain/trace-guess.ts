import {
  cellsOfLine,
  hasDecimalComma,
  instantOfCell,
  numberOfCell,
  traceSeparators,
  type TraceColumns,
  type TraceDecimal,
  type TraceSeparator,
  type TraceTimeUnit,
} from './trace-cells.ts';
import { temperatureUnitOf } from './temperature-unit.ts';

export type GuessedQuantity = 'temperature' | 'pressure' | 'current' | 'voltage' | 'other';

export interface TraceGuess extends TraceColumns {
  quantity: GuessedQuantity;
  unit: string;
}

const MOST_LINES = 200;
const TIME_TITLE = /\b(time|zeit|elapsed|date|datetime|timestamp|t)\b/i;
const IN_BRACKETS = /[([{]\s*([^)\]}]+?)\s*[)\]}]/;
const AFTER_SIGN = /[/_,]\s*([^\s/_,]+)\s*$/;
const TIME_UNITS: [RegExp, TraceTimeUnit][] = [
  [/^(ms|milliseconds?|msec)$/i, 'ms'],
  [/^(us|µs|μs|microseconds?|usec)$/i, 'us'],
  [/^(min|minutes?)$/i, 'min'],
];
const PRESSURE_UNIT = /^([hkMG]?Pa|m?bar|atm|psi|Torr)$/;
const CURRENT_UNIT = /^[munµkM]?A$/;
const VOLTAGE_UNIT = /^[munµkM]?V$/;

/** The titles of the columns: the last line above the numbers with as many cells as they have. */
export function columnTitles(
  lines: readonly string[],
  separator: TraceSeparator,
  decimal: TraceDecimal,
): string[] {
  const rows = lines.map((line) => cellsOfLine(line, separator));
  const first = rows.findIndex((cells) => isNumberRow(cells, decimal));
  const width = rows[first]?.length ?? rows[0]?.length ?? 0;
  const title = rows.slice(0, Math.max(0, first)).findLast((cells) => cells.length === width);
  return Array.from({ length: width }, (_, column) => title?.[column] || `column ${column + 1}`);
}

/** What the first lines of a table most likely mean; a person may change all of it. */
export function guessTraceTable(allLines: readonly string[]): TraceGuess {
  const lines = allLines.filter((line) => line.trim() !== '').slice(0, MOST_LINES);
  const { separator, decimal } = guessWriting(lines);
  const rows = lines
    .map((line) => cellsOfLine(line, separator))
    .filter((cells) => isNumberRow(cells, decimal));
  const titles = columnTitles(lines, separator, decimal);
  const timeColumn = guessTimeColumn(titles, rows, decimal);
  const valueColumn = guessValueColumn(titles, rows, { decimal, timeColumn });
  const timeUnit = guessTimeUnit(titles[timeColumn] ?? '', rows[0]?.[timeColumn] ?? '');
  const { quantity, unit } = guessQuantity(titles[valueColumn] ?? '');
  return { separator, decimal, timeColumn, timeUnit, valueColumn, quantity, unit };
}

/** A row of a table has at least two cells that are numbers or instants. */
function isNumberRow(cells: readonly string[], decimal: TraceDecimal): boolean {
  return cells.filter((cell) => isFigure(cell, decimal)).length >= 2;
}

function isFigure(cell: string, decimal: TraceDecimal): boolean {
  return !Number.isNaN(numberOfCell(cell, decimal)) || instantOfCell(cell) !== null;
}

/** The separator and decimal sign with which most lines come apart into figures; the more figures a line has, the better. */
function guessWriting(lines: readonly string[]): { separator: TraceSeparator; decimal: TraceDecimal } {
  let best = { separator: 'comma' as TraceSeparator, decimal: 'point' as TraceDecimal, score: 0 };
  for (const separator of traceSeparators) {
    for (const decimal of decimalsFor(separator)) {
      const score = scoreOf(lines, separator, decimal);
      if (score > best.score) best = { separator, decimal, score };
    }
  }
  return { separator: best.separator, decimal: best.decimal };
}

function decimalsFor(separator: TraceSeparator): TraceDecimal[] {
  return separator === 'comma' ? ['point'] : ['point', 'comma'];
}

/** Share of cells that are figures, times the rows; decimal commas inside cells count for the reading that has them. */
function scoreOf(lines: readonly string[], separator: TraceSeparator, decimal: TraceDecimal): number {
  let score = 0;
  for (const line of lines) {
    const cells = cellsOfLine(line, separator);
    if (!isNumberRow(cells, decimal)) continue;
    const figures = cells.filter((cell) => isFigure(cell, decimal)).length;
    const commas = decimal === 'comma' && cells.some(hasDecimalComma) ? 0.5 : 0;
    // Between commas "0,5;21,3" is three cells, two of them figures; between semicolons it is two, both figures.
    score += (figures / cells.length) ** 2 + commas + (separator === 'space' ? -0.1 : 0);
  }
  return score;
}

function guessTimeColumn(
  titles: readonly string[],
  rows: readonly string[][],
  decimal: TraceDecimal,
): number {
  const isFigureColumn = (column: number) => isFigure(rows[0]?.[column] ?? '', decimal);
  const instants = titles.findIndex((_, column) => instantOfCell(rows[0]?.[column] ?? '') !== null);
  if (instants >= 0) return instants;
  const titled = titles.findIndex(
    (title, column) => TIME_TITLE.test(wordsOf(title)) && isFigureColumn(column),
  );
  if (titled >= 0) return titled;
  const rising = titles.findIndex((_, column) => isRising(rows, column, decimal));
  return Math.max(0, rising);
}

function isRising(rows: readonly string[][], column: number, decimal: TraceDecimal): boolean {
  const numbers = rows.map((cells) => numberOfCell(cells[column] ?? '', decimal));
  return numbers.length > 1 && numbers.every((number, n) => n === 0 || number > numbers[n - 1]!);
}

interface Taken {
  decimal: TraceDecimal;
  timeColumn: number;
}

function guessValueColumn(titles: readonly string[], rows: readonly string[][], taken: Taken): number {
  const { decimal, timeColumn } = taken;
  const columns = titles.map((_, column) => column).filter((column) => column !== timeColumn);
  const numeric = columns.filter((column) => !Number.isNaN(numberOfCell(rows[0]?.[column] ?? '', decimal)));
  const quantityOf = (column: number) => guessQuantity(titles[column] ?? '').quantity;
  return (
    numeric.find((column) => quantityOf(column) === 'temperature') ??
    numeric.find((column) => quantityOf(column) !== 'other') ??
    // What only counts upwards is the number of a row, or another clock.
    numeric.find((column) => !isRising(rows, column, decimal)) ??
    numeric[0] ??
    columns[0] ??
    0
  );
}

function guessTimeUnit(title: string, cell: string): TraceTimeUnit {
  if (instantOfCell(cell) !== null) return 'iso';
  const unit = unitOf(title);
  return TIME_UNITS.find(([pattern]) => pattern.test(unit))?.[1] ?? 's';
}

/** The unit a title tells: "T (°C)", "p [mbar]", "temp/K", "time_ms". */
function unitOf(title: string): string {
  return IN_BRACKETS.exec(title)?.[1] ?? AFTER_SIGN.exec(title)?.[1] ?? '';
}

function wordsOf(title: string): string {
  return title.replace(/[_/]/g, ' ');
}

function guessQuantity(title: string): { quantity: GuessedQuantity; unit: string } {
  const unit = unitOf(title).trim();
  const temperature = temperatureUnitOf(unit);
  if (temperature !== null) return { quantity: 'temperature', unit: temperature };
  if (PRESSURE_UNIT.test(unit)) return { quantity: 'pressure', unit };
  if (CURRENT_UNIT.test(unit)) return { quantity: 'current', unit };
  if (VOLTAGE_UNIT.test(unit)) return { quantity: 'voltage', unit };
  return { quantity: quantityWord(title), unit };
}

function quantityWord(title: string): GuessedQuantity {
  const words = wordsOf(title);
  if (/temp|thermo|\bT\b/.test(words) || /temperature/i.test(words)) return 'temperature';
  if (/press|druck/i.test(words)) return 'pressure';
  if (/current|strom/i.test(words)) return 'current';
  return /volt|spannung/i.test(words) ? 'voltage' : 'other';
}
