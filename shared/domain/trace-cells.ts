export const traceSeparators = ['comma', 'semicolon', 'tab', 'bar', 'space'] as const;
export type TraceSeparator = (typeof traceSeparators)[number];
export const traceDecimals = ['point', 'comma'] as const;
export type TraceDecimal = (typeof traceDecimals)[number];
export const traceTimeUnits = ['s', 'ms', 'us', 'min', 'iso'] as const;
export type TraceTimeUnit = (typeof traceTimeUnits)[number];

/** Where time and value stand in a table, and how its numbers are written. */
export interface TraceColumns {
  separator: TraceSeparator;
  decimal: TraceDecimal;
  timeColumn: number;
  timeUnit: TraceTimeUnit;
  valueColumn: number;
}

const separatorText: Record<Exclude<TraceSeparator, 'space'>, string> = {
  comma: ',',
  semicolon: ';',
  tab: '\t',
  bar: '|',
};
const NUMBER = /^[-+]?(\d+\.?\d*|\.\d+)(e[-+]?\d+)?$/i;
const COMMA_NUMBER = /^[-+]?(\d+,?\d*|,\d+)(e[-+]?\d+)?$/i;
const ISO = /^(\d{4})-(\d\d)-(\d\d)[T ](\d\d):(\d\d)(?::(\d\d)([.,]\d+)?)?\s*(?:Z|([-+])(\d\d):?(\d\d)?)?$/i;

/** The cells of one line; a cell in double quotes may hold the separator (RFC 4180). */
export function cellsOfLine(line: string, separator: TraceSeparator): string[] {
  if (separator === 'space') return line.trim().split(/\s+/).map(unquoted);
  const mark = separatorText[separator];
  return line.includes('"') ? quotedCells(line, mark) : line.split(mark).map((cell) => cell.trim());
}

function quotedCells(line: string, mark: string): string[] {
  const cells: string[] = [];
  let isQuoted = false;
  let start = 0;
  for (let at = 0; at < line.length; at++) {
    const sign = line[at];
    if (sign === '"') isQuoted = !isQuoted;
    if (sign !== mark || isQuoted) continue;
    cells.push(unquoted(line.slice(start, at)));
    start = at + 1;
  }
  return [...cells, unquoted(line.slice(start))];
}

function unquoted(cell: string): string {
  const text = cell.trim();
  if (text.length < 2 || !text.startsWith('"') || !text.endsWith('"')) return text;
  return text.slice(1, -1).replaceAll('""', '"').trim();
}

/** The number of a cell, or NaN where it holds none. */
export function numberOfCell(cell: string, decimal: TraceDecimal): number {
  if (decimal === 'point') return NUMBER.test(cell) ? finite(Number(cell)) : Number.NaN;
  return COMMA_NUMBER.test(cell) ? finite(Number(cell.replace(',', '.'))) : Number.NaN;
}

function finite(value: number): number {
  return Number.isFinite(value) ? value : Number.NaN;
}

export function hasDecimalComma(cell: string): boolean {
  return cell.includes(',') && COMMA_NUMBER.test(cell);
}

/** Whole seconds since 1970 and the fraction apart, so that microseconds survive. */
export interface CellInstant {
  seconds: number;
  fraction: number;
  /** Without a zone a clock reading is taken as UTC. */
  hasZone: boolean;
}

/** The instant of a cell in ISO 8601, or `null` where it is none. */
export function instantOfCell(cell: string): CellInstant | null {
  const found = ISO.exec(cell);
  if (!found) return null;
  const [year, month, day, hour, minute, second] = found.slice(1, 7).map((part) => Number(part ?? 0));
  const ms = Date.UTC(year!, month! - 1, day, hour, minute, second);
  const isReal = month! >= 1 && month! <= 12 && new Date(ms).getUTCDate() === day && minute! < 60;
  if (!isReal || hour! > 23 || second! > 60) return null;
  const zoneS = (Number(found[9] ?? 0) * 60 + Number(found[10] ?? 0)) * 60;
  return {
    seconds: ms / 1000 - (found[8] === '-' ? -zoneS : zoneS),
    fraction: found[7] === undefined ? 0 : Number(found[7].replace(',', '.')),
    hasZone: found[8] !== undefined || /z$/i.test(cell),
  };
}
