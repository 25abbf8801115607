/** A cell of a grid; row 0 is the line of headings. */
export interface GridCell {
  row: number;
  column: number;
}

export interface GridSize {
  /** With the line of headings. */
  rows: number;
  columns: number;
  /** Rows that fit into the frame. */
  pageRows: number;
}

/** Where a key leads from a cell, as the grid pattern of WAI-ARIA has it; `null` for a key that moves nothing. */
export function cellAfterKey(
  press: { key: string; ctrlKey: boolean },
  cell: GridCell,
  { rows, columns, pageRows }: GridSize,
): GridCell | null {
  const page = Math.max(1, pageRows - 1);
  const last = { row: rows - 1, column: columns - 1 };
  const targets: Readonly<Record<string, GridCell>> = {
    ArrowUp: { ...cell, row: cell.row - 1 },
    ArrowDown: { ...cell, row: cell.row + 1 },
    ArrowLeft: { ...cell, column: cell.column - 1 },
    ArrowRight: { ...cell, column: cell.column + 1 },
    PageUp: { ...cell, row: Math.max(Math.min(1, cell.row), cell.row - page) },
    PageDown: { ...cell, row: cell.row + page },
    Home: press.ctrlKey ? { row: Math.min(1, last.row), column: 0 } : { ...cell, column: 0 },
    End: press.ctrlKey ? last : { ...cell, column: last.column },
  };
  const target = targets[press.key];
  if (!target) return null;
  return {
    row: Math.max(0, Math.min(last.row, target.row)),
    column: Math.max(0, Math.min(last.column, target.column)),
  };
}
