import { frameRowColumns } from '../../measuring/view-reader.ts';

const rowsPerPiece = 500;

/** Lines of RFC 4180, many at a time; an empty cell where a silent frame has no value. */
export async function* framesCsv(rows: AsyncIterable<(number | null)[]>): AsyncGenerator<string> {
  let lines = [frameRowColumns.join(',')];
  for await (const row of rows) {
    lines.push(row.map((value) => value ?? '').join(','));
    if (lines.length < rowsPerPiece) continue;
    yield toText(lines);
    lines = [];
  }
  yield toText(lines);
}

function toText(lines: readonly string[]): string {
  return lines.map((line) => `${line}\r\n`).join('');
}
