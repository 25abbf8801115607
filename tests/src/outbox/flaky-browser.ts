import type { MarkPlace, SaveRequest } from '@/composables/outbox/outbox-entry.ts';
import type { SendAnswer } from '@/composables/outbox/outbox-sender.ts';
import type { EntryChange, OutboxStore } from '@/composables/outbox/outbox-store.ts';
import { createMemoryStore } from '@/composables/outbox/outbox-store.ts';
import type { OutboxNews, TabChannel } from '@/composables/outbox/tab-channel.ts';
import type { FakeServer } from './fake-server.ts';
import type { Random } from './random.ts';
import type { VirtualTime } from './virtual-time.ts';

/** A window that can end at any moment: what was on its way to it never arrives. */
export interface Life {
  isAlive: boolean;
  onEnd: (() => void)[];
}

type Guarded = <Values extends unknown[]>(
  life: Life,
  run: (...values: Values) => void,
) => (...values: Values) => void;

const whileAlive: Guarded =
  (life, run) =>
  (...values) => {
    if (life.isAlive) run(...values);
  };

/** The storage of the browser: slow, in order, whole; what a window asked for before it ended may be lost or done. */
export function createSlowStorage(time: VirtualTime, random: Random) {
  const kept = createMemoryStore();
  let freeAtMs = 0;

  function inTurn(life: Life, run: () => void): void {
    freeAtMs = Math.max(freeAtMs, time.nowMs()) + random.below(3);
    time.after(freeAtMs - time.nowMs(), whileAlive(life, run));
  }

  const storeFor = (life: Life): OutboxStore => ({
    update: (id: string, change: EntryChange) =>
      new Promise((resolve) => {
        inTurn(life, () => {
          void kept.update(id, change).then(whileAlive(life, resolve));
        });
      }),
    get: (id) => new Promise((resolve) => inTurn(life, () => void kept.get(id).then(resolve))),
    all: () => new Promise((resolve) => inTurn(life, () => void kept.all().then(resolve))),
  });

  return { storeFor, all: () => kept.all() };
}

/** One lock for each person, given to the windows in turn and given up by one that ends. */
export function createLocks() {
  const queues = new Map<string, (() => void)[]>();

  function next(name: string): void {
    const queue = queues.get(name) ?? [];
    queue.shift();
    queue[0]?.();
  }

  return (life: Life, name: string) =>
    async (work: () => Promise<void>): Promise<void> => {
      const queue = queues.get(name) ?? [];
      queues.set(name, queue);
      await new Promise<void>((resolve) => {
        const begin = () => (life.isAlive ? resolve() : next(name));
        life.onEnd.push(() => {
          if (queue[0] === begin) next(name);
        });
        queue.push(begin);
        if (queue[0] === begin) begin();
      });
      await work();
      if (life.isAlive) next(name);
    };
}

/** News from window to window, each a little late. */
export function createLateChannel(time: VirtualTime, random: Random) {
  const ears = new Set<{ life: Life; personId: string; hear: (news: OutboxNews) => void }>();
  return (life: Life): TabChannel => ({
    post: (news) => {
      for (const ear of ears)
        if (ear.life !== life && ear.personId === news.personId)
          time.after(
            random.below(4),
            whileAlive(ear.life, () => ear.hear(structuredClone(news))),
          );
    },
    listen(personId, hear) {
      const ear = { life, personId, hear };
      ears.add(ear);
      return () => ears.delete(ear);
    },
  });
}

const LATEST_MS = 400;

/** Requests that are lost before or after they arrive, arrive late, or arrive twice; a server that refuses or is not there. */
export function createFlakyNetwork(time: VirtualTime, random: Random, server: FakeServer) {
  const state = { isOffline: false, isDown: false, trouble: 0.25 };

  function send(life: Life, request: SaveRequest, place: MarkPlace): Promise<SendAnswer> {
    return new Promise((resolve) => {
      const answer = whileAlive(life, (value: SendAnswer) =>
        time.after(
          random.below(20),
          whileAlive(life, () => resolve(value)),
        ),
      );
      const copy = structuredClone({ request, place });
      const isArriving = () => !state.isOffline && !state.isDown;
      const arrive = () => server.take(copy.request, copy.place);
      if (!isArriving()) return answer(unreachable());
      if (!random.chance(state.trouble)) {
        time.after(random.below(20), () => answer(isArriving() ? arrive() : unreachable()));
        return undefined;
      }
      return troubled(arrive, answer);
    });
  }

  function troubled(arrive: () => SendAnswer, answer: (value: SendAnswer) => void): undefined {
    const kind = random.below(6);
    if (kind === 0) answer(unreachable());
    else if (kind === 1) time.after(random.below(20), () => (arrive(), answer(unreachable())));
    else if (kind === 2) {
      time.after(random.below(LATEST_MS), arrive);
      answer(unreachable());
    } else if (kind === 3) {
      time.after(random.below(20), () => answer(arrive()));
      time.after(random.below(LATEST_MS), arrive);
    } else if (kind === 4) answer({ kind: 'later', why: 'busy', retryAfterS: random.below(5) });
    else
      answer({
        kind: 'later',
        why: random.pick(['full', 'failing', 'busy'] as const) ?? 'full',
        retryAfterS: null,
      });
  }

  return { state, send };
}

function unreachable(): SendAnswer {
  return { kind: 'later', why: 'unreachable', retryAfterS: null };
}
