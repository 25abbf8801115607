/** Where a page ended: the sort key of its last row, and the row's id where keys are equal. */
export interface RowPlace {
  key: string | number;
  id: string;
}
