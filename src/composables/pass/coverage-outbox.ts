import { coverageSpanSchema } from '@shared/contract/coverage.ts';
import type { CoverageSpan } from '@shared/contract/coverage.ts';
import { toSpanSet } from '@shared/domain/span-set.ts';

/** What came of sending a batch: `later` keeps it, `never` gives it up. */
export type SendOutcome = 'stored' | 'later' | 'never';

export interface CoverageOutboxOptions {
  send: (spans: CoverageSpan[]) => Promise<SendOutcome>;
  /** Where what is not stored yet outlives the page. */
  read: () => string | null;
  write: (text: string | null) => void;
}

const MOST_IN_BATCH = 400;

/**
 * Spans that the server has not confirmed yet. Joined where they touch, so that hours without a connection stay small; sent
 * again as often as needed, since the server joins them too and a batch that comes twice changes nothing.
 */
export function createCoverageOutbox({ send, read, write }: CoverageOutboxOptions) {
  let waiting: CoverageSpan[] = restore(read());
  let underway: CoverageSpan[] = [];
  let sending: Promise<boolean> | null = null;

  function all(): CoverageSpan[] {
    return [...underway, ...waiting];
  }

  function keep(): void {
    const left = all();
    write(left.length > 0 ? JSON.stringify(left) : null);
  }

  function add(spans: readonly CoverageSpan[]): void {
    waiting = joinLanes([...waiting, ...spans]);
    keep();
  }

  async function sendNext(): Promise<boolean> {
    while (waiting.length > 0) {
      underway = waiting.slice(0, MOST_IN_BATCH);
      waiting = waiting.slice(MOST_IN_BATCH);
      const outcome = await send(underway);
      if (outcome === 'later') waiting = joinLanes(all());
      underway = [];
      keep();
      if (outcome === 'later') return false;
    }
    return true;
  }

  /** True where nothing is left. Two calls at once share the work. */
  async function flush(): Promise<boolean> {
    sending ??= sendNext().finally(() => (sending = null));
    return sending;
  }

  return { add, all, flush };
}

const keptSchema = coverageSpanSchema.array();

function restore(text: string | null): CoverageSpan[] {
  try {
    return keptSchema.parse(JSON.parse(text ?? '[]'));
  } catch {
    return [];
  }
}

/** Joins spans of one way, channel and detail where they overlap or touch. */
export function joinLanes(spans: readonly CoverageSpan[]): CoverageSpan[] {
  const lanes = new Map<string, CoverageSpan[]>();
  for (const span of spans) {
    const lane = `${span.way}/${span.channel}/${span.detail}`;
    lanes.set(lane, [...(lanes.get(lane) ?? []), span]);
  }
  return [...lanes.values()].flatMap((lane) =>
    toSpanSet(lane).map((span) => ({ ...(lane[0] as CoverageSpan), ...span })),
  );
}
