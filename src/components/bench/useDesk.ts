import { useLocalStorage } from '@vueuse/core';
import { computed, nextTick, ref, shallowRef, watch, watchEffect } from 'vue';
import { voiceClassKey } from '@shared/domain/label-scheme.ts';
import { useMarkLink } from '@/components/bench/useMarkLink.ts';
import { FIRST_LOOK, nextColours, otherView } from '@/components/bench/look.ts';
import type { PointedPlace } from '@/components/bench/pointer-work.ts';
import { frameWords, readoutWords } from '@/components/bench/stage-words.ts';
import { benchHotkeys } from '@/composables/bench/bench-hotkeys.ts';
import { withKeys } from '@/composables/bench/class-keys.ts';
import { provideKeys, shownKey } from '@/composables/bench/keys-context.ts';
import type { Bench } from '@/composables/bench/useBench.ts';
import { withRoundKeys } from '@/composables/rounds/round-keys.ts';
import { useRoundLook } from '@/components/rounds/useRoundLook.ts';
import { joinSaving } from '@/composables/rounds/round-words.ts';
import type { Round } from '@/composables/rounds/useRound.ts';
import { useAnnounce } from '@/composables/useAnnounce.ts';
import { useHotkeys } from '@/composables/useHotkeys.ts';
import { useHotkeySettings } from '@/composables/useHotkeySettings.ts';

export type DeskSheet = 'keys' | 'finish';
export type Desk = ReturnType<typeof useDesk>;

/** What the page around the bench adds to it: its keys, its sheets, the colours, the point under the pointer. */
export function useDesk(bench: Bench, round: Round | null = null) {
  const { view, marks, layout } = bench;
  const classes = withKeys(bench.scheme.classes);
  const link = useMarkLink(bench);
  /** Parts of the aside that a key opens. */
  const aside = shallowRef<{ showSteps: () => void; showTable: () => void } | null>(null);
  const look = useLocalStorage('recalesce.bench.look', FIRST_LOOK, { mergeDefaults: true });
  const point = shallowRef<PointedPlace | null>(null);
  watchEffect(() => (bench.circumstances.isNormalised.value = look.value.isOverQuiet));
  const openSheet = ref<DeskSheet | null>(null);
  /** A class that holds the recording, while somebody is asked whether it is meant. */
  const asked = shallowRef<{ run: () => void } | null>(null);
  const { announce } = useAnnounce();

  function askFirst(classKey: string, run: () => void): void {
    if (classKey === voiceClassKey) asked.value = { run };
    else run();
  }

  function chooseClass(classKey: string, isLessSure: boolean): void {
    askFirst(classKey, () => name(classKey, isLessSure));
  }

  /** In a round a class answers the candidate, unless somebody has drawn a span that the detector has not. */
  function name(classKey: string, isLessSure: boolean): void {
    if (round && !bench.draft.value) round.answerEvent(classKey, isLessSure);
    else bench.chooseClass(classKey, isLessSure);
  }

  function confirmAsked(): void {
    asked.value?.run();
    asked.value = null;
  }

  function changeSelectedClass(classKey: string): void {
    askFirst(classKey, () => bench.hand.setClass(classKey));
  }

  watch(
    () => bench.marks.selectedKeys.value.size,
    (count) => count > 1 && void announce(`${count} marks selected`),
  );

  async function editNote(): Promise<void> {
    await nextTick();
    document.querySelector<HTMLElement>('[data-note]')?.focus();
  }

  function takePoint(place: PointedPlace | null): void {
    point.value = place;
    if (place) view.pointerSample.value = Math.min(layout.frames - 1, Math.max(0, place.sample));
    else if (view.pointerSample.value !== null) view.placeCursor(view.pointerSample.value);
  }

  const benchKeys = benchHotkeys(bench, classes, {
    showKeys: () => (openSheet.value = 'keys'),
    nextColours: () => (look.value = nextColours(look.value)),
    otherView: () => (look.value = otherView(look.value)),
    editNote: () => void editNote(),
    showSteps: () => aside.value?.showSteps(),
    showTable: () => aside.value?.showTable(),
    copyLink: () => void link.copyLink(),
    say: (words) => void announce(words),
    chooseClass,
  });
  const hotkeys = round ? withRoundKeys(benchKeys, bench, round) : benchKeys;
  const { inForce } = useHotkeys(hotkeys, () => openSheet.value === null && asked.value === null);
  const { settings } = useHotkeySettings();
  provideKeys(inForce);
  const choices = computed(() =>
    classes.map((choice) => {
      const hotkey = inForce.value.find(({ id }) => id === `bench.class.${choice.key}`);
      return { ...choice, keyName: shownKey(hotkey, settings.value.areSingleKeysOn).text };
    }),
  );
  link.openLink();

  return {
    choices,
    look,
    ...useRoundLook(bench, look, round !== null),
    openSheet,
    asked,
    aside,
    ...link,
    /** With their first combinations, as the sheet of keys needs them. */
    hotkeys,
    saving: computed(() => joinSaving(marks.saving.value, round?.saving.value)),
    isAllStored: computed(() => marks.isAllStored.value && (round?.isAllStored.value ?? true)),
    retry: () => {
      marks.retry();
      round?.retry();
    },
    /** What a class key would do now. */
    intent: computed(() =>
      round && !bench.draft.value
        ? 'A class key names the candidate, with Shift less sure'
        : bench.intent.value,
    ),
    frameText: computed(() => frameWords(bench)),
    readout: computed(() => readoutWords(bench, point.value)),
    chooseClass,
    confirmAsked,
    changeSelectedClass,
    takePoint,
    /** Does what a key does, for a button. */
    run: (id: string) => hotkeys.find((hotkey) => hotkey.id === id)?.run(new KeyboardEvent('keydown')),
  };
}
