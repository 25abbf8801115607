import { computed, ref, shallowRef } from 'vue';
import type { RoundItem } from '@shared/contract/rounds.ts';
import type { useRoundItems } from '@/composables/rounds/useRoundItems.ts';

export interface RoundPlaceOptions {
  items: ReturnType<typeof useRoundItems>;
  isAnswered: (item: RoundItem) => boolean;
  show: (item: RoundItem) => void;
}

/** So many are fetched while somebody looks at one: who is sure answers faster than a busy server draws. */
const UPCOMING = 3;

/** Where a round stands, and the way to the next candidate, back, and on. */
export function useRoundPlace({ items, isAnswered, show }: RoundPlaceOptions) {
  const current = shallowRef<RoundItem | null>(null);
  /** Ranks in the order in which they were shown. */
  const visited = shallowRef<readonly number[]>([]);
  const place = ref(-1);
  /** The next one is being fetched. */
  const isWaiting = ref(false);
  const isDone = ref(false);
  /** Why the next one cannot be had. */
  const trouble = shallowRef<unknown>(null);
  let journey = 0;

  function arrive(item: RoundItem): void {
    current.value = item;
    isDone.value = false;
    show(item);
    items.lookAhead(item.rank);
  }

  function goTo(item: RoundItem): void {
    visited.value = [...visited.value.slice(0, place.value + 1), item.rank];
    place.value = visited.value.length - 1;
    arrive(item);
  }

  /** The next that is not answered, as far as it is known here; `undefined` where it has to be fetched. */
  function nextKnown(from: number): { item: RoundItem } | { missing: number } | null {
    for (let rank = from; rank < items.progress.value.candidates; rank++) {
      const item = items.items.value.get(rank);
      if (!item) return { missing: rank };
      if (!isAnswered(item)) return { item };
    }
    return null;
  }

  /** Those that come next, as far as they are here. */
  function upcomingAfter(rank: number): RoundItem[] {
    const found: RoundItem[] = [];
    let known = nextKnown(rank + 1);
    while (known && 'item' in known && found.length < UPCOMING) {
      found.push(known.item);
      known = nextKnown(known.item.rank + 1);
    }
    return found;
  }

  /** To the next that is not answered: at once where it is here. At the end, what was left out comes again. */
  async function advance(): Promise<void> {
    const known = nextKnown((current.value?.rank ?? -1) + 1);
    if (known && 'item' in known) return goTo(known.item);
    await travel(async () => (await fetchNext(known)) ?? (await fetchLeftOut()));
  }

  async function fetchNext(known: { missing: number } | null): Promise<RoundItem | null> {
    let next: ReturnType<typeof nextKnown> = known;
    while (next && 'missing' in next) {
      await items.load(next.missing);
      const again = nextKnown(next.missing);
      if (again && 'missing' in again && again.missing === next.missing) return null;
      next = again;
    }
    return next?.item ?? null;
  }

  async function fetchLeftOut(): Promise<RoundItem | null> {
    const first = nextKnown(0);
    if (!first) return null;
    return 'item' in first ? first.item : fetchNext(first);
  }

  /** Only the newest way counts: whoever presses on meanwhile is not called back. */
  async function travel(find: () => Promise<RoundItem | null>): Promise<void> {
    const mine = ++journey;
    isWaiting.value = true;
    trouble.value = null;
    try {
      const item = await find();
      if (mine !== journey) return;
      if (item) goTo(item);
      else isDone.value = true;
    } catch (error) {
      if (mine === journey) trouble.value = error;
    } finally {
      if (mine === journey) isWaiting.value = false;
    }
  }

  async function jumpTo(rank: number): Promise<void> {
    await travel(() => items.at(rank));
  }

  function step(direction: 1 | -1): boolean {
    const rank = visited.value[place.value + direction];
    const item = rank === undefined ? undefined : items.items.value.get(rank);
    if (!item) return false;
    place.value += direction;
    arrive(item);
    return true;
  }

  return {
    current,
    isWaiting,
    isDone,
    trouble,
    advance,
    jumpTo,
    back: () => step(-1),
    /** To where one was before going back, else on without an answer. */
    on: async () => {
      if (!step(1)) await advance();
    },
    forget(): void {
      journey++;
      current.value = null;
      visited.value = [];
      place.value = -1;
      isDone.value = false;
    },
    upcoming: computed(() => (current.value ? upcomingAfter(current.value.rank) : [])),
  };
}
