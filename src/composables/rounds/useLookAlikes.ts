import { computed, watch } from 'vue';
import type { Ref } from 'vue';
import type { RoundGroup, RoundItem } from '@shared/contract/rounds.ts';
import { isSameSaying } from '@/composables/rounds/round-steps.ts';
import type { Said } from '@/composables/rounds/round-steps.ts';
import type { useRoundItems } from '@/composables/rounds/useRoundItems.ts';

export interface LookAlikes {
  group: RoundGroup;
  /** The example and the spot checks, with what was said. */
  checks: readonly { item: RoundItem; said: Said | null }[];
  /** Members that are not answered yet, those that are no checks. */
  rest: readonly RoundItem[];
  /** What all checks were answered; `null` while some are open, or where they differ. */
  agreed: Said | null;
  state: 'checking' | 'differing' | 'ready' | 'answered';
}

export interface LookAlikesOptions {
  items: ReturnType<typeof useRoundItems>;
  current: Ref<RoundItem | null>;
  said: Ref<ReadonlyMap<string, Said>>;
}

/** The group of the candidate that is shown, and whether the rest of it can be answered at once. */
export function useLookAlikes({ items, current, said }: LookAlikesOptions) {
  const group = computed(() => items.groups.value.get(current.value?.groupKey ?? '') ?? null);
  watch(group, (present) => {
    if (present) void items.membersOf(present).catch(() => {});
  });

  return computed<LookAlikes | null>(() => {
    const present = group.value;
    return present ? describe(present, items.items.value, said.value) : null;
  });
}

export function describe(
  group: RoundGroup,
  items: ReadonlyMap<number, RoundItem>,
  said: ReadonlyMap<string, Said>,
): LookAlikes {
  const members = Array.from({ length: group.size }, (_value, index) =>
    items.get(group.firstRank + index),
  ).filter((item) => item !== undefined);
  const sayingOf = (item: RoundItem) => said.get(item.candidate.id) ?? null;
  const checks = members
    .filter(({ rank }) => rank <= group.firstRank + group.spotChecks)
    .map((item) => ({ item, said: sayingOf(item) }));
  const rest = members.filter((item) => item.rank > group.firstRank + group.spotChecks && !sayingOf(item));
  const first = checks[0]?.said ?? null;
  const isAllSaid = checks.length > 0 && checks.every((check) => check.said !== null);
  const agreed = isAllSaid && checks.every((check) => isSameSaying(check.said, first)) ? first : null;
  const isAllHere = members.length === group.size;
  const state = !isAllSaid
    ? 'checking'
    : !agreed
      ? 'differing'
      : rest.length > 0 || !isAllHere
        ? 'ready'
        : 'answered';
  return { group, checks, rest: isAllHere ? rest : [], agreed, state };
}
