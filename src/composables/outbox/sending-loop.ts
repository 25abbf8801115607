/** Why nothing is sent at the moment. */
export type Halt = 'none' | 'unreachable' | 'busy' | 'full' | 'failing' | 'signed-out';

/** No answer that would settle anything: it is tried again. */
export type NoAnswer =
  | { kind: 'signed-out' }
  | { kind: 'later'; why: Exclude<Halt, 'none' | 'signed-out'>; retryAfterS: number | null };

export interface LoopParts {
  /** Runs the work while no other window of this browser sends the same of this person. */
  alone: (work: () => Promise<void>) => Promise<void>;
  /** Calls back after a while; returns the way to stop it. */
  wait: (delayMs: number, run: () => void) => () => void;
  /** In [0, 1). */
  random: () => number;
  onHalt: (halt: Halt) => void;
}

const LONGEST_DELAY_S = 30;

/** Whole seconds that double with each failure, spread so that many browsers do not come back at the same moment. */
export function delayMs(failures: number, retryAfterS: number | null, random: number): number {
  if (retryAfterS !== null) return Math.round((retryAfterS + random) * 1000);
  return Math.round(Math.min(LONGEST_DELAY_S, 2 ** failures) * (0.5 + random / 2) * 1000);
}

/** Sends what waits when it is woken, one window at a time, and rests with growing pauses where it cannot. */
export function createSendingLoop({ alone, wait, random, onHalt }: LoopParts, drain: () => Promise<void>) {
  let isRunning = false;
  let isAskedAgain = false;
  let isStopped = false;
  let failures = 0;
  let halt: Halt = 'none';
  let stopWaiting: (() => void) | null = null;

  function setHalt(next: Halt): void {
    halt = next;
    onHalt(next);
  }

  const mayRun = () => !isStopped && halt === 'none';

  /** Something may wait to be sent. */
  async function wake(): Promise<void> {
    isAskedAgain = true;
    if (isRunning) return;
    isRunning = true;
    try {
      while (isAskedAgain && mayRun()) {
        isAskedAgain = false;
        await alone(drain);
      }
    } finally {
      isRunning = false;
    }
  }

  /** Also where nobody is signed in: somebody may have signed in again in another window. */
  function pause(why: Exclude<Halt, 'none'>, retryAfterS: number | null): void {
    setHalt(why);
    stopWaiting?.();
    stopWaiting = wait(delayMs(failures, retryAfterS, random()), retry);
    failures++;
  }

  /** Tries at once what waits: the connection is back, or somebody signed in again. */
  function retry(): void {
    stopWaiting?.();
    stopWaiting = null;
    if (halt !== 'none') setHalt('none');
    void wake();
  }

  return {
    mayRun,
    pause,
    retry,
    wake: () => void wake(),
    /** An answer came: the next pause is a short one. */
    wasAnswered: () => {
      failures = 0;
    },
    stop(): void {
      isStopped = true;
      stopWaiting?.();
    },
  };
}
