import type { FrameTable } from '../../measuring/view-reader.ts';
import { csvPieces } from './csv-pieces.ts';

/** An empty cell where a silent frame has no value. */
export function framesCsv({ columns, rows }: FrameTable): AsyncGenerator<string> {
  return csvPieces(columns, rows);
}
