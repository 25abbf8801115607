interface RowRange {
  startIndex: number;
  endIndex: number;
  count: number;
}

/** Rows beyond those in sight, so that a turn of the wheel finds them ready. */
const rowsBeyond = 10;

/**
 * Ranks of the rows that stand in the page, rising: those in sight, some on both sides, and the row in hand wherever it is,
 * since a row that left the page would take the keyboard with it.
 */
export function ranksInPage({ startIndex, endIndex, count }: RowRange, inHand: number): number[] {
  const first = Math.max(0, startIndex - rowsBeyond);
  const last = Math.min(count - 1, endIndex + rowsBeyond);
  const ranks = Array.from({ length: Math.max(0, last - first + 1) }, (_value, index) => first + index);
  if (inHand < first) return inHand >= 0 ? [inHand, ...ranks] : ranks;
  return inHand > last && inHand < count ? [...ranks, inHand] : ranks;
}
