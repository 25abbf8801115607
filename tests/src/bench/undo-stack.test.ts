import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { emptyUndoStack, pushStep, takeRedo, takeUndo } from '@/composables/bench/undo-stack.ts';
import type { MarkStep, UndoStack } from '@/composables/bench/undo-stack.ts';

type State = Map<string, number>;
type Edits = readonly (readonly [string, number | null])[];

/** Keys a to d come and go with values, several at once; times lie far apart, so that nothing is joined. */
function play(steps: readonly Edits[]) {
  const state: State = new Map();
  let stack: UndoStack<number> = emptyUndoStack();
  const states: State[] = [new Map()];
  steps.forEach((edits, index) => {
    const changes = [...new Map(edits)].map(([key, after]) => ({
      key,
      before: state.get(key) ?? null,
      after,
    }));
    for (const { key, after } of changes) put(state, key, after);
    stack = pushStep(stack, { name: 'change', what: 'value', changes, atMs: index * 60_000 });
    states.push(new Map(state));
  });
  return { state, stack, states };
}

function put(state: State, key: string, value: number | null): void {
  if (value === null) state.delete(key);
  else state.set(key, value);
}

function step(
  after: number,
  atMs: number,
  what = 'start',
  keys: readonly string[] = ['a'],
): MarkStep<number> {
  const changes = keys.map((key) => ({ key, before: after - 1, after }));
  return { name: `${what} moved`, what, changes, atMs };
}

const edits = fc.array(
  fc.tuple(
    fc.constantFrom('a', 'b', 'c', 'd'),
    fc.option(fc.integer({ min: 0, max: 99 }), { nil: null, freq: 3 }),
  ),
  { minLength: 1, maxLength: 4 },
);
const steps = fc.array(edits, { maxLength: 30 });

describe('undo stack', () => {
  it('passes every earlier state on the way back, and comes to the end by doing all again', () => {
    fc.assert(
      fc.property(steps, (list) => {
        const { state, stack, states } = play(list);
        const end = new Map(state);
        let present = stack;
        for (let taken = takeUndo(present); taken; taken = takeUndo(present)) {
          for (const { key, before } of taken.step.changes) put(state, key, before);
          present = taken.stack;
          expect(state).toEqual(states[present.done.length]);
        }
        expect(state.size).toBe(0);
        for (let taken = takeRedo(present); taken; taken = takeRedo(present)) {
          for (const { key, after } of taken.step.changes) put(state, key, after);
          present = taken.stack;
        }
        expect(state).toEqual(end);
      }),
    );
  });

  it('has no end: the first of two thousand changes can be taken back', () => {
    const { stack } = play(Array.from({ length: 2000 }, (_, index) => [['a', index] as const]));
    expect(stack.done).toHaveLength(2000);
  });

  it('forgets what was taken back as soon as something new is done', () => {
    const { stack } = play([[['a', 1]]]);
    const undone = takeUndo(stack)?.stack ?? stack;
    expect(takeRedo(pushStep(undone, step(5, 1)))).toBeNull();
  });

  it('takes quick presses of the same kind on the same marks as one change', () => {
    const stack = [2, 3, 4].reduce(
      (present, after, index) => pushStep(present, step(after, index * 300, 'start', ['a', 'b'])),
      emptyUndoStack<number>(),
    );
    expect(stack.done).toHaveLength(1);
    expect(takeUndo(stack)?.step.changes).toEqual([
      { key: 'a', before: 1, after: 4 },
      { key: 'b', before: 1, after: 4 },
    ]);
  });

  it('keeps other kinds, later ones and other marks apart', () => {
    const first = pushStep(emptyUndoStack<number>(), step(2, 0));
    expect(pushStep(first, step(3, 100, 'end')).done).toHaveLength(2);
    expect(pushStep(first, step(3, 5000)).done).toHaveLength(2);
    expect(pushStep(first, step(3, 100, 'start', ['b'])).done).toHaveLength(2);
    expect(pushStep(first, step(3, 100, 'start', ['a', 'b'])).done).toHaveLength(2);
  });

  it('does not join a deletion with the change before it', () => {
    const first = pushStep(emptyUndoStack<number>(), step(2, 0));
    const gone = { ...step(2, 100), changes: [{ key: 'a', before: 2, after: null }] };
    expect(pushStep(first, gone).done).toHaveLength(2);
  });
});
