import { shallowRef } from 'vue';
import type { RoundOrder } from '@shared/contract/passes.ts';
import type { RoundGroup, RoundItem, RoundPage, RoundProgress } from '@shared/contract/rounds.ts';
import { mostAnswers } from '@shared/contract/rounds.ts';
import { getRound } from '@/api/rounds.ts';

export interface RoundItemsOptions {
  passId: string;
  /** What the server has, as soon as it is known. */
  onItems: (items: readonly RoundItem[]) => void;
}

const PAGE = 40;

/** The candidates of a round by rank, asked for as they are needed. */
export function useRoundItems({ passId, onItems }: RoundItemsOptions) {
  const items = shallowRef<ReadonlyMap<number, RoundItem>>(new Map());
  const groups = shallowRef<ReadonlyMap<string, RoundGroup>>(new Map());
  const order = shallowRef<RoundOrder | null>(null);
  const progress = shallowRef<RoundProgress>({ candidates: 0, events: 0, noEvents: 0, undecided: 0 });
  const isReplaced = shallowRef(false);
  const underway = new Map<string, Promise<RoundPage>>();

  /** Starts anew in an order, at the first that is not answered. */
  async function open(wanted: RoundOrder | null): Promise<RoundPage> {
    const page = await getRound(passId, { limit: PAGE, ...(wanted ? { order: wanted } : {}) });
    items.value = new Map();
    groups.value = new Map();
    order.value = page.order;
    progress.value = page.progress;
    isReplaced.value = page.isReplaced;
    take(page);
    return page;
  }

  function take(page: RoundPage): void {
    if (page.order !== order.value) return;
    items.value = new Map([...items.value, ...page.items.map((item) => [item.rank, item] as const)]);
    if (page.groups.length > 0)
      groups.value = new Map([...groups.value, ...page.groups.map((group) => [group.key, group] as const)]);
    onItems(page.items);
  }

  /** The page that begins at this rank; asked for once, however often it is wanted. */
  async function load(rank: number, limit = PAGE): Promise<RoundPage> {
    const key = `${order.value} ${rank} ${limit}`;
    const asked =
      underway.get(key) ?? getRound(passId, { rank, limit, ...(order.value ? { order: order.value } : {}) });
    underway.set(key, asked);
    try {
      const page = await asked;
      take(page);
      return page;
    } finally {
      underway.delete(key);
    }
  }

  async function at(rank: number): Promise<RoundItem | null> {
    if (rank < 0 || rank >= progress.value.candidates) return null;
    if (!items.value.has(rank)) await load(rank);
    return items.value.get(rank) ?? null;
  }

  /** All members of a group, by rank. */
  async function membersOf({ firstRank, size }: RoundGroup): Promise<RoundItem[]> {
    const ranks = Array.from({ length: size }, (_value, index) => firstRank + index);
    if (ranks.some((rank) => !items.value.has(rank))) await load(firstRank, Math.min(size, mostAnswers));
    return ranks.map((rank) => items.value.get(rank)).filter((item) => item !== undefined);
  }

  /** Asks for what comes after a rank before it is needed. */
  function lookAhead(rank: number): void {
    const wanted = rank + PAGE / 2;
    if (wanted < progress.value.candidates && !items.value.has(wanted))
      void load(firstMissing(rank)).catch(() => {});
  }

  function firstMissing(rank: number): number {
    let missing = rank;
    while (items.value.has(missing)) missing++;
    return missing;
  }

  return { items, groups, order, progress, isReplaced, open, load, at, membersOf, lookAhead };
}
