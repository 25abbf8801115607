import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { emptyUndoStack, pushStep, takeRedo, takeUndo } from '@/composables/bench/undo-stack.ts';
import type { MarkStep, UndoStack } from '@/composables/bench/undo-stack.ts';

type State = Map<string, number>;

/** Keys a to c come and go with values; times lie far apart, so that nothing is joined. */
function play(changes: readonly (readonly [string, number | null])[]) {
  const state: State = new Map();
  let stack: UndoStack<number> = emptyUndoStack();
  changes.forEach(([key, after], index) => {
    const before = state.get(key) ?? null;
    put(state, key, after);
    stack = pushStep(stack, { name: 'change', what: 'value', key, before, after, atMs: index * 60_000 });
  });
  return { state, stack };
}

function put(state: State, key: string, value: number | null): void {
  if (value === null) state.delete(key);
  else state.set(key, value);
}

function step(after: number, atMs: number, what = 'start'): MarkStep<number> {
  return { name: `${what} moved`, what, key: 'a', before: after - 1, after, atMs };
}

const changes = fc.array(
  fc.tuple(
    fc.constantFrom('a', 'b', 'c'),
    fc.option(fc.integer({ min: 0, max: 99 }), { nil: null, freq: 3 }),
  ),
  { maxLength: 30 },
);

describe('undo stack', () => {
  it('comes back to the beginning by undoing all, and to the end by doing all again', () => {
    fc.assert(
      fc.property(changes, (list) => {
        const { state, stack } = play(list);
        const end = new Map(state);
        let present = stack;
        for (let taken = takeUndo(present); taken; taken = takeUndo(present)) {
          put(state, taken.step.key, taken.step.before);
          present = taken.stack;
        }
        expect(state.size).toBe(0);
        for (let taken = takeRedo(present); taken; taken = takeRedo(present)) {
          put(state, taken.step.key, taken.step.after);
          present = taken.stack;
        }
        expect(state).toEqual(end);
      }),
    );
  });

  it('forgets what was taken back as soon as something new is done', () => {
    const { stack } = play([['a', 1]]);
    const undone = takeUndo(stack)?.stack ?? stack;
    expect(takeRedo(pushStep(undone, step(5, 1)))).toBeNull();
  });

  it('takes quick presses of the same kind as one change', () => {
    const stack = [step(2, 0), step(3, 300), step(4, 700)].reduce(
      (present, next) => pushStep(present, next),
      emptyUndoStack<number>(),
    );
    expect(stack.done).toHaveLength(1);
    expect(takeUndo(stack)?.step).toMatchObject({ before: 1, after: 4 });
  });

  it('keeps other kinds, later ones and other marks apart', () => {
    const first = pushStep(emptyUndoStack<number>(), step(2, 0));
    expect(pushStep(first, step(3, 100, 'end')).done).toHaveLength(2);
    expect(pushStep(first, step(3, 5000)).done).toHaveLength(2);
    expect(pushStep(first, { ...step(3, 100), key: 'b' }).done).toHaveLength(2);
  });
});
