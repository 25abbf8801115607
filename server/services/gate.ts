type Task<Result> = () => Promise<Result>;

/** Lets so many tasks run at once and the others wait in the order in which they came. */
export function createGate(limit: number): <Result>(task: Task<Result>) => Promise<Result> {
  let running = 0;
  const waiting: (() => void)[] = [];

  async function enter(): Promise<void> {
    if (running < limit) running += 1;
    else await new Promise<void>((resolve) => waiting.push(resolve));
  }

  function leave(): void {
    const next = waiting.shift();
    if (next === undefined) running -= 1;
    else next();
  }

  return async (task) => {
    await enter();
    try {
      return await task();
    } finally {
      leave();
    }
  };
}
