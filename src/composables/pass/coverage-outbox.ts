import type { CoverageSpan } from '@shared/contract/coverage.ts';
import { toSpanSet } from '@shared/domain/span-set.ts';
import { createKeptCoverage, passesKept } from '@/composables/pass/kept-coverage.ts';
import type { CoveragePlace } from '@/composables/pass/kept-coverage.ts';

/** What came of sending a batch: `later` keeps it, `never` gives it up. */
export type SendOutcome = 'stored' | 'later' | 'never';

export interface CoverageOutboxOptions {
  send: (spans: CoverageSpan[]) => Promise<SendOutcome>;
  /** Where what is not stored yet outlives the page. */
  read: () => CoverageSpan[];
  /** An empty list where nothing waits any more. */
  write: (spans: readonly CoverageSpan[]) => void;
}

const MOST_IN_BATCH = 400;

/**
 * Spans that the server has not confirmed yet. Joined where they touch, so that hours without a connection stay small; sent
 * again as often as needed, since the server joins them too and a batch that comes twice changes nothing.
 */
export function createCoverageOutbox({ send, read, write }: CoverageOutboxOptions) {
  let waiting: CoverageSpan[] = joinLanes(read());
  let underway: CoverageSpan[] = [];
  let sending: Promise<boolean> | null = null;

  function all(): CoverageSpan[] {
    return [...underway, ...waiting];
  }

  function add(spans: readonly CoverageSpan[]): void {
    waiting = joinLanes([...waiting, ...spans]);
    write(all());
  }

  async function sendNext(): Promise<boolean> {
    while (waiting.length > 0) {
      underway = waiting.slice(0, MOST_IN_BATCH);
      waiting = waiting.slice(MOST_IN_BATCH);
      const outcome = await send(underway);
      if (outcome === 'later') waiting = joinLanes(all());
      underway = [];
      write(all());
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

/** Joins spans of one way, channel and detail where they overlap or touch. */
export function joinLanes(spans: readonly CoverageSpan[]): CoverageSpan[] {
  const lanes = new Map<string, CoverageSpan[]>();
  for (const span of spans) {
    const lane = `${span.way}/${span.channel}/${span.detail}`;
    const known = lanes.get(lane);
    if (known) known.push(span);
    else lanes.set(lane, [span]);
  }
  return [...lanes.values()].flatMap((lane) =>
    toSpanSet(lane).map((span) => ({ ...(lane[0] as CoverageSpan), ...span })),
  );
}

/** What other benches of this person could not send; a pass that takes nothing any more lets it go. */
export async function sendLeftBehind(
  place: CoveragePlace,
  send: (passId: string, spans: CoverageSpan[]) => Promise<SendOutcome>,
  storage: Storage,
): Promise<void> {
  for (const passId of passesKept(place.personId, storage)) {
    if (passId === place.passId) continue;
    const kept = createKeptCoverage({ ...place, passId }, storage);
    await createCoverageOutbox({ ...kept, send: (spans) => send(passId, spans) }).flush();
  }
}
