import { stringify } from 'csv-stringify/sync';
import { compareKeys } from './byte-order.ts';
import { freeText, integerText, numberText } from './cells.ts';

export type CellValue = string | number | boolean | null;

export interface ColumnFacts {
  name: string;
  type: 'string' | 'integer' | 'number' | 'boolean' | 'datetime';
  /** What it means, with the unit where there is one. */
  description: string;
  required?: boolean;
  unique?: boolean;
  enum?: readonly string[];
  pattern?: string;
  minimum?: number;
  maximum?: number;
  /** Written by people: guarded against spreadsheets that run formulas. */
  isFreeText?: boolean;
}

export interface Column<Row> extends ColumnFacts {
  /** A text in a column of numbers is written as it is: it already has its one form. */
  value: (row: Row) => CellValue;
}

export interface ForeignKey {
  field: string;
  table: string;
  targetField: string;
}

export interface TableFacts {
  name: string;
  /** Path below `data/`. */
  path: string;
  title: string;
  description: string;
  primaryKey: string[];
  foreignKeys: ForeignKey[];
}

export interface TableDefinition<Row> extends TableFacts {
  columns: Column<Row>[];
  rows: readonly Row[];
  /** Rows are written in the order of these keys. */
  orderBy: (row: Row) => (string | number)[];
}

/** A table as it stands in the archive. */
export interface WrittenTable extends TableFacts {
  columns: ColumnFacts[];
  /** Cells in the order of `columns`, rows in the order of the file. */
  rows: string[][];
  csv: Buffer;
}

export function writeTable<Row>({ columns, rows, orderBy, ...facts }: TableDefinition<Row>): WrittenTable {
  const ordered = rows.map((row) => ({ row, key: orderBy(row) })).sort((a, b) => compareKeys(a.key, b.key));
  const cells = ordered.map(({ row }) => columns.map((column) => cellText(column, column.value(row))));
  const columnFacts = columns.map(({ value: _value, ...column }) => column);
  return { ...facts, columns: columnFacts, rows: cells, csv: toCsv(columnFacts, cells) };
}

function cellText(column: ColumnFacts, value: CellValue): string {
  if (value === null) return '';
  if (typeof value === 'boolean') return String(value);
  if (typeof value === 'string') return column.isFreeText ? freeText(value) : value;
  return column.type === 'integer' ? integerText(value) : numberText(value);
}

/** RFC 4180 quoting, UTF-8 without byte order mark, LF, a header row. */
function toCsv(columns: ColumnFacts[], rows: string[][]): Buffer {
  const header = columns.map((column) => column.name);
  return Buffer.from(stringify([header, ...rows], { record_delimiter: '\n' }), 'utf8');
}
