import type { RecordingEvent } from '@shared/contract/events.ts';
import { createMarkLedger } from '@/composables/bench/mark-ledger.ts';
import type { MarkFields } from '@/composables/bench/mark.ts';
import { takeBack } from '@/composables/bench/take-back.ts';
import type { MarkPlace } from '@/composables/outbox/outbox-entry.ts';
import { createOutbox } from '@/composables/outbox/outbox.ts';
import type { Outbox } from '@/composables/outbox/outbox.ts';
import type { Life } from './flaky-browser.ts';
import type { World } from './model-world.ts';

interface Step {
  key: string;
  from: MarkFields | null;
  to: MarkFields | null;
}

export interface ModelWindow {
  place: MarkPlace;
  life: Life;
  view: ReadonlyMap<string, MarkFields>;
  outbox: Outbox;
  step: (key: string, to: MarkFields | null) => void;
  undo: () => void;
  isAtWork: () => boolean;
  isReady: () => boolean;
  /** Without a warning, as a crash, a reload and a closed window all are. */
  end: () => void;
}

/** A window with the bench in it: what it shows, what can be undone in it, and its part of the outbox. */
export function openWindow(world: World, place: MarkPlace): ModelWindow {
  const { time, random, server, network, oracle } = world;
  const life: Life = { isAlive: true, onEnd: [] };
  const view = new Map<string, MarkFields>();
  const steps: Step[] = [];
  const recent = new Map<string, RecordingEvent | null>();
  const state = { isReady: false };
  const outbox = createOutbox({
    personId: place.personId,
    store: world.storage.storeFor(life),
    channel: world.channelFor(life),
    send: (request, whose) => {
      if (whose.personId !== place.personId) world.faults.push('a window sent a mark of somebody else');
      return network.send(life, request, whose);
    },
    newId: world.newId,
    alone: world.lockFor(life, place.personId),
    wait: (delayMs, run) => time.after(delayMs, () => life.isAlive && run()),
    random: random.next,
    nowMs: time.nowMs,
    onTold: (told) => {
      if (told.event !== undefined) recent.set(told.event?.id ?? told.id, told.event);
      if (state.isReady) ledger.hear(told);
    },
    onChange: () => undefined,
  });
  const ledger = createMarkLedger({
    passId: place.passId,
    newId: world.newId,
    isWriting: (id) => outbox.writingIds().includes(id),
    onShow: (key, { fields }) => (fields ? view.set(key, fields) : view.delete(key)),
    put: ({ id, from, to, stored }) => {
      const seen = { isKept: false, isTold: false };
      const change = {
        id,
        from,
        stored,
        /** Read when the change is kept, and not before. */
        get to() {
          if (!seen.isKept) oracle.kept(from, to, place);
          seen.isKept = true;
          return to;
        },
      };
      void outbox.put(change, place).then(() => (seen.isTold = true));
      life.onEnd.push(() => {
        const story = oracle.stories.get((to ?? from)?.startSample ?? -1);
        if (!seen.isTold && seen.isKept && story) story.isOpen = true;
      });
    },
  });

  function fetchMarks(): void {
    if (!life.isAlive) return;
    const canReach = !network.state.isOffline && !network.state.isDown;
    if (!canReach || server.session.personId !== place.personId) {
      time.after(700, fetchMarks);
      return;
    }
    recent.clear();
    time.after(random.below(10), () => {
      const events = server.live(place.passId).map(({ event }) => event);
      time.after(random.below(10), () => life.isAlive && begin(events));
    });
  }

  function begin(events: readonly RecordingEvent[]): void {
    for (const event of events) view.set(event.id, event);
    ledger.begin(events, recent, outbox.entries());
    state.isReady = true;
  }

  function put(key: string, to: MarkFields | null): void {
    if (to) view.set(key, to);
    else view.delete(key);
    ledger.want(key, to);
  }

  function step(key: string, to: MarkFields | null): void {
    steps.push({ key, from: view.get(key) ?? null, to });
    put(key, to);
  }

  function undo(): void {
    const last = steps.pop();
    if (!last) return;
    const fields = takeBack(view.get(last.key) ?? null, last.to, last.from);
    if (fields !== undefined) put(last.key, fields);
  }

  void outbox.load();
  fetchMarks();
  return {
    place,
    life,
    view,
    outbox,
    step,
    undo,
    isAtWork: () => life.isAlive && state.isReady && outbox.halt() !== 'signed-out',
    isReady: () => state.isReady,
    end(): void {
      life.isAlive = false;
      outbox.stop();
      for (const run of life.onEnd) run();
    },
  };
}
