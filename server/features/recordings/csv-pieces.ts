import { freeText } from '../../packaging/cells.ts';

export type CsvCell = number | string | boolean | null;

const rowsPerPiece = 500;

/** Lines of RFC 4180, many at a time; an empty cell where there is no value, texts guarded against being run as formulas. */
export async function* csvPieces(
  columns: readonly string[],
  rows: AsyncIterable<readonly CsvCell[]>,
): AsyncGenerator<string> {
  let lines = [columns.join(',')];
  for await (const row of rows) {
    lines.push(row.map(cellText).join(','));
    if (lines.length < rowsPerPiece) continue;
    yield toText(lines);
    lines = [];
  }
  yield toText(lines);
}

function cellText(value: CsvCell): string {
  if (value === null) return '';
  return typeof value === 'string' ? quoted(freeText(value)) : String(value);
}

function quoted(text: string): string {
  return /[",\n]/.test(text) ? `"${text.replaceAll('"', '""')}"` : text;
}

function toText(lines: readonly string[]): string {
  return lines.map((line) => `${line}\r\n`).join('');
}
