import type { BenchRow } from './bench.ts';

const COLUMNS = ['what', 'ours', 'peer', 'ratio', 'must', 'reachable', ''] as const;
const GAP = '  ';

/** The rows as lines of text, each column as wide as its widest entry. */
export function tableLines(rows: readonly BenchRow[]): string[] {
  const cells = [[...COLUMNS], ...rows.map(cellsOf)];
  const widths = COLUMNS.map((_, column) => Math.max(...cells.map((row) => row[column]!.length)));
  const lines = cells.map((row) =>
    row
      .map((cell, column) => cell.padEnd(widths[column]!))
      .join(GAP)
      .trimEnd(),
  );
  return [lines[0]!, widths.map((width) => '-'.repeat(width)).join(GAP), ...lines.slice(1)];
}

function cellsOf(row: BenchRow): string[] {
  const { what, ours, peer = '', ratio = '', must = '', reachable = '', holds } = row;
  return [what, ours, peer, ratio, must, reachable, holds === undefined ? '' : holds ? 'holds' : 'MISSED'];
}
