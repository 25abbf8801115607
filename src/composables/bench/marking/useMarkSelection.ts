import { computed, shallowRef } from 'vue';
import type { Ref } from 'vue';
import type { BenchMark } from '@/composables/bench/mark.ts';

interface Selection {
  keys: ReadonlySet<string>;
  /** The one whose facts are shown and whose edges can be taken hold of. */
  leadKey: string | null;
}

const NOTHING: Selection = { keys: new Set(), leadKey: null };

export type MarkSelection = ReturnType<typeof useMarkSelection>;

/** Which marks are in hand: none, one, or several with one that leads. */
export function useMarkSelection(byKey: Ref<ReadonlyMap<string, BenchMark>>) {
  const selection = shallowRef<Selection>(NOTHING);

  const selectedKey = computed({
    get: () => selection.value.leadKey,
    set: (key: string | null) => {
      selection.value = key === null ? NOTHING : { keys: new Set([key]), leadKey: key };
    },
  });
  const selected = computed(() => byKey.value.get(selectedKey.value ?? '') ?? null);
  /** In order of time. */
  const selectedMarks = computed(() =>
    [...selection.value.keys]
      .map((key) => byKey.value.get(key))
      .filter((mark) => mark !== undefined)
      .sort((a, b) => a.startSample - b.startSample),
  );

  function selectMany(keys: readonly string[], leadKey: string | null = keys.at(-1) ?? null): void {
    selection.value = leadKey === null ? NOTHING : { keys: new Set([...keys, leadKey]), leadKey };
  }

  function toggle(key: string): void {
    const keys = new Set(selection.value.keys);
    if (keys.delete(key)) selectMany([...keys]);
    else selectMany([...keys, key]);
  }

  function forget(key: string): void {
    if (!selection.value.keys.has(key)) return;
    const keys = [...selection.value.keys].filter((one) => one !== key);
    const lead = selection.value.leadKey;
    selectMany(keys, lead === key ? (keys.at(-1) ?? null) : lead);
  }

  return {
    selectedKey,
    selectedKeys: computed(() => selection.value.keys),
    selected,
    selectedMarks,
    selectMany,
    toggle,
    forget,
  };
}
