/** Ranks of rows that are shown; `last` belongs to them. */
export interface RankRange {
  first: number;
  last: number;
}

/** Rows that are asked for at once. */
export const rowsPerPage = 100;
/** Rows before and behind those shown that are asked for as well, so that slow scrolling never waits. */
const rowsAhead = 60;

/** Numbers of the pages that hold the rows shown and some around them. */
export function pagesAround({ first, last }: RankRange, count: number): number[] {
  if (count === 0) return [];
  const from = Math.floor(Math.max(0, first - rowsAhead) / rowsPerPage);
  const to = Math.floor(Math.min(count - 1, last + rowsAhead) / rowsPerPage);
  return Array.from({ length: Math.max(0, to - from + 1) }, (_value, index) => from + index);
}

export function placeOfRank(rank: number): { page: number; index: number } {
  return { page: Math.floor(rank / rowsPerPage), index: rank % rowsPerPage };
}
