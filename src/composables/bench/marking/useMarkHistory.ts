import { computed, shallowRef } from 'vue';
import type { MarkFields } from '@/composables/bench/mark.ts';
import { takeBack } from '@/composables/bench/take-back.ts';
import { emptyUndoStack, pushStep, takeRedo, takeUndo } from '@/composables/bench/undo-stack.ts';
import type { MarkStep, Taken } from '@/composables/bench/undo-stack.ts';
import { useAnnounce } from '@/composables/useAnnounce.ts';

export interface MarkHistoryParts {
  present: (key: string) => MarkFields | null;
  place: (changes: readonly { key: string; fields: MarkFields | null }[]) => void;
  select: (keys: readonly string[]) => void;
}

/** A line in the list of changes. */
export interface HistoryLine {
  name: string;
  atMs: number;
  /** How many changes are done when this one is the last. */
  count: number;
  isDone: boolean;
}

/** What was done to marks, without an end: taken back, done again, or gone back to. */
export function useMarkHistory({ present, place, select }: MarkHistoryParts) {
  const stack = shallowRef(emptyUndoStack<MarkFields>());
  const { announce } = useAnnounce();

  /** What another window changed since stays; where that is all of it, nothing moves. Returns what to say. */
  function follow(taken: Taken<MarkFields> | null, side: 'before' | 'after'): string | null {
    if (!taken) return null;
    stack.value = taken.stack;
    const { changes, name } = taken.step;
    const moved = changes.flatMap(({ key, ...sides }) => {
      const fields = takeBack(present(key), sides[side === 'before' ? 'after' : 'before'], sides[side]);
      return fields === undefined ? [] : [{ key, fields }];
    });
    place(moved);
    const left = moved.filter(({ fields }) => fields !== null).map(({ key }) => key);
    if (left.length > 0) select(left);
    if (moved.length === 0) return `Left as it is, since another window changed it: ${name}`;
    return side === 'before' ? `Taken back: ${name}` : `Done again: ${name}`;
  }

  const back = () => follow(takeUndo(stack.value), 'before');
  const forth = () => follow(takeRedo(stack.value), 'after');

  function undo(): void {
    void announce(back() ?? 'Nothing to take back');
  }

  function redo(): void {
    void announce(forth() ?? 'Nothing to do again');
  }

  /** Takes back, or does again, until so many changes are done. */
  function goTo(count: number): void {
    while (stack.value.done.length > count && back() !== null);
    while (stack.value.done.length < count && forth() !== null);
    const last = stack.value.done.at(-1);
    void announce(last ? `Gone to: ${last.name}` : 'Gone to: before the first change');
  }

  /** Newest first; what was taken back stands above what is done. */
  const history = computed<HistoryLine[]>(() => {
    const { done, undone } = stack.value;
    return [...done, ...[...undone].reverse()]
      .map(({ name, atMs }, index) => ({ name, atMs, count: index + 1, isDone: index < done.length }))
      .reverse();
  });

  return {
    push: (step: MarkStep<MarkFields>) => (stack.value = pushStep(stack.value, step)),
    undo,
    redo,
    goTo,
    history,
    undoName: computed(() => stack.value.done.at(-1)?.name ?? null),
    redoName: computed(() => stack.value.undone.at(-1)?.name ?? null),
  };
}
