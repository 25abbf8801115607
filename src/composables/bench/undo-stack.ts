/** What became of one mark; `null` stands for "not there". */
export interface MarkChange<Mark> {
  key: string;
  before: Mark | null;
  after: Mark | null;
}

/** One thing that was done, to one mark or to several at once. */
export interface MarkStep<Mark> {
  /** What was done, for the button and the live region: "crack at 41.3248 s set". */
  name: string;
  /** Which kind of change: "start", "class". */
  what: string;
  changes: readonly MarkChange<Mark>[];
  /** When it was done, in milliseconds of the wall clock. */
  atMs: number;
}

/** Held keys and quick presses of the same kind count as one change. */
const ONE_CHANGE_MS = 900;

/** What has been done and what has been taken back, newest last in both. */
export interface UndoStack<Mark> {
  done: readonly MarkStep<Mark>[];
  undone: readonly MarkStep<Mark>[];
}

export interface Taken<Mark> {
  step: MarkStep<Mark>;
  stack: UndoStack<Mark>;
}

export function emptyUndoStack<Mark>(): UndoStack<Mark> {
  return { done: [], undone: [] };
}

/** A new change ends what could have been done again. */
export function pushStep<Mark>(stack: UndoStack<Mark>, step: MarkStep<Mark>): UndoStack<Mark> {
  const last = stack.done.at(-1);
  if (!last || !goesOn(last, step)) return { done: [...stack.done, step], undone: [] };
  const changes = step.changes.map((change, index) => ({
    ...change,
    before: last.changes[index]?.before ?? null,
  }));
  return { done: [...stack.done.slice(0, -1), { ...step, name: last.name, changes }], undone: [] };
}

/** Moving an edge by ten presses of a key is one change, not ten. */
function goesOn<Mark>(last: MarkStep<Mark>, step: MarkStep<Mark>): boolean {
  if (last.what !== step.what || step.atMs - last.atMs >= ONE_CHANGE_MS) return false;
  if (last.changes.length !== step.changes.length) return false;
  return step.changes.every(({ key, after }, index) => {
    const earlier = last.changes[index];
    return earlier?.key === key && earlier.before !== null && earlier.after !== null && after !== null;
  });
}

/** Takes the newest change back: the caller puts each `before` in place. */
export function takeUndo<Mark>(stack: UndoStack<Mark>): Taken<Mark> | null {
  const step = stack.done.at(-1);
  if (!step) return null;
  return { step, stack: { done: stack.done.slice(0, -1), undone: [...stack.undone, step] } };
}

/** Does the newest change that was taken back again: the caller puts each `after` in place. */
export function takeRedo<Mark>(stack: UndoStack<Mark>): Taken<Mark> | null {
  const step = stack.undone.at(-1);
  if (!step) return null;
  return { step, stack: { done: [...stack.done, step], undone: stack.undone.slice(0, -1) } };
}
