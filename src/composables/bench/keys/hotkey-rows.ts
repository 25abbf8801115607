import type { Hotkey } from '@/composables/useHotkeys.ts';

/** What the keys ask of the page around the bench. */
export interface PageActions {
  showKeys: () => void;
  nextColours: () => void;
  /** Levels as they are, or over the quiet. */
  otherView: () => void;
  editNote: () => void;
  /** For the live region. */
  say: (words: string) => void;
  showSteps: () => void;
  showTable: () => void;
  copyLink: () => void;
  /** Asked first, since some classes hold the recording. */
  chooseClass: (classKey: string, isLessSure: boolean) => void;
}

/** A combination of its own, a name that says what happens, and what does it. */
export type Row = [id: string, combo: string, label: string, run: () => void, repeats?: boolean];

export function toHotkeys(group: string, rows: readonly Row[]): Hotkey[] {
  return rows.map(([id, combo, label, run, repeats = false]) => ({
    id: `bench.${id}`,
    combo,
    label,
    group,
    repeats,
    run,
  }));
}
