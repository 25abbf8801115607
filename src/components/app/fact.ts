/** One line of a definition table: a term and its figure or words. */
export interface Fact {
  /** Name of the slot that may replace the value: `value-<key>`. */
  key: string;
  term: string;
  value: string;
  /** Longer form on hover. */
  title?: string;
  /** Worth a warm light. */
  isGlowing?: boolean;
  /** Words are set in the text family and may wrap. */
  isWords?: boolean;
}
