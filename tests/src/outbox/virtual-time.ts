import { setImmediate } from 'node:timers';

interface Task {
  atMs: number;
  order: number;
  run: () => void;
}

/** Time that passes only when it is told to, so that hours of waiting cost nothing. */
export function createVirtualTime() {
  const tasks: Task[] = [];
  let nowMs = 0;
  let order = 0;

  function after(delayMs: number, run: () => void): () => void {
    const task = { atMs: nowMs + delayMs, order: order++, run };
    tasks.push(task);
    return () => {
      const index = tasks.indexOf(task);
      if (index >= 0) tasks.splice(index, 1);
    };
  }

  /** Runs what is due first, and everything that follows from it without waiting. @returns false where nothing is left. */
  async function step(): Promise<boolean> {
    let first: Task | undefined;
    for (const task of tasks) if (!first || isBefore(task, first)) first = task;
    if (!first) return false;
    tasks.splice(tasks.indexOf(first), 1);
    nowMs = Math.max(nowMs, first.atMs);
    first.run();
    await settled();
    return true;
  }

  return { after, step, nowMs: () => nowMs };
}

function isBefore(a: Task, b: Task): boolean {
  return a.atMs < b.atMs || (a.atMs === b.atMs && a.order < b.order);
}

/** Until everything that waits for nothing has run. */
export function settled(): Promise<void> {
  return new Promise((done) => setImmediate(done));
}

export type VirtualTime = ReturnType<typeof createVirtualTime>;
