export interface RowPlace {
  /** Rank of the row in hand. */
  rank: number;
  count: number;
  /** Rows that fit into the frame. */
  pageRows: number;
}

/** Where a key of the list leads from a row; `null` for a key that moves nothing. */
export function rankAfterKey(key: string, { rank, count, pageRows }: RowPlace): number | null {
  const step = Math.max(1, pageRows - 1);
  const targets: Readonly<Record<string, number>> = {
    ArrowDown: rank + 1,
    ArrowUp: rank - 1,
    PageDown: rank + step,
    PageUp: rank - step,
    Home: 0,
    End: count - 1,
  };
  const target = targets[key];
  return target === undefined || count === 0 ? null : clampRank(target, count);
}

export function clampRank(rank: number, count: number): number {
  return Math.max(0, Math.min(count - 1, rank));
}
