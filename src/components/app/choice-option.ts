/** One entry of a select, a radio group or a group of checkboxes. */
export interface ChoiceOption<Value extends string = string> {
  value: Value;
  label: string;
  /** A sentence under the label; selects do not show it. */
  hint?: string;
  disabled?: boolean;
}
