export interface TableColumn {
  key: string;
  label: string;
  /** Sorts when its heading is pressed. */
  isSortable?: boolean;
  /** Figures are set in the mono family, right-aligned. */
  isFigure?: boolean;
  /** Names the row: usually the first column. */
  isRowHeader?: boolean;
  /** The heading is for screen readers only, as for a column of buttons. */
  isLabelHidden?: boolean;
  /** Keeps long words on one line. */
  isNoWrap?: boolean;
}

export interface TableSort {
  key: string;
  direction: 'ascending' | 'descending';
}

/** What pressing a heading leads to: first the other direction of the same column, else ascending. */
export function nextSort(current: TableSort | null, key: string): TableSort {
  const isSameAscending = current?.key === key && current.direction === 'ascending';
  return { key, direction: isSameAscending ? 'descending' : 'ascending' };
}

/** Sort order as the interface takes it: `name`, `-startedAt`. */
export function sortToText(sort: TableSort): string {
  return sort.direction === 'descending' ? `-${sort.key}` : sort.key;
}

export function textToSort(text: string): TableSort | null {
  if (text === '') return null;
  return text.startsWith('-')
    ? { key: text.slice(1), direction: 'descending' }
    : { key: text, direction: 'ascending' };
}
