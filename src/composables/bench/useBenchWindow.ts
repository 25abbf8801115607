import { watchDebounced } from '@vueuse/core';
import { computed, shallowRef } from 'vue';
import { useRoute, useRouter } from 'vue-router';
import {
  centreOn,
  clampWindow,
  panBy,
  wholeWindow,
  windowAround,
  windowSamples,
  zoomAround,
} from '@/composables/bench/time-axis.ts';
import type { TimeWindow } from '@/composables/bench/time-axis.ts';

const ADDRESS_AFTER_MS = 400;

function sampleFrom(value: unknown): number | null {
  return typeof value === 'string' && /^\d{1,15}$/.test(value) ? Number(value) : null;
}

/** What part of the recording is shown, and where the next mark would stand. Kept in the address for a link. */
export function useBenchWindow(frames: number) {
  const route = useRoute();
  const router = useRouter();
  const shown = shallowRef<TimeWindow>(startWindow());
  const cursorSample = shallowRef((shown.value.startSample + shown.value.endSample) / 2);
  /** How high the keyboard's cursor reads the level, where it was ever moved up or down. */
  const cursorHz = shallowRef<number | null>(null);
  /** Where the pointer is over the picture; the keyboard takes over until it moves again. */
  const pointerSample = shallowRef<number | null>(null);

  function startWindow(): TimeWindow {
    const from = sampleFrom(route.query.from);
    const to = sampleFrom(route.query.to);
    if (from === null || to === null || to <= from) return wholeWindow(frames);
    return clampWindow({ startSample: from, endSample: to }, frames);
  }

  function show(next: TimeWindow): void {
    shown.value = clampWindow(next, frames);
  }

  function placeCursor(sample: number): void {
    pointerSample.value = null;
    cursorSample.value = Math.min(frames - 1, Math.max(0, sample));
  }

  /** Moves the cursor; the window follows where it would be left. */
  function moveCursor(share: number): void {
    const from = pointerSample.value ?? cursorSample.value;
    placeCursor(from + share * windowSamples(shown.value));
    const { startSample, endSample } = shown.value;
    if (cursorSample.value < startSample || cursorSample.value >= endSample)
      show(centreOn(shown.value, cursorSample.value, frames));
  }

  function bringIntoView(span: TimeWindow): void {
    const { startSample, endSample } = shown.value;
    const isInside = span.startSample >= startSample && span.endSample <= endSample;
    if (!isInside) show(centreOn(shown.value, (span.startSample + span.endSample) / 2, frames));
  }

  const place = computed(() => pointerSample.value ?? cursorSample.value);

  watchDebounced(
    shown,
    ({ startSample, endSample }) => {
      const isWhole = startSample <= 0 && endSample >= frames;
      const { from: _from, to: _to, ...rest } = route.query;
      const part = { from: String(Math.floor(startSample)), to: String(Math.ceil(endSample)) };
      void router.replace({ query: isWhole ? rest : { ...rest, ...part } });
    },
    { debounce: ADDRESS_AFTER_MS },
  );

  return {
    shown,
    place,
    pointerSample,
    cursorSample,
    cursorHz,
    show,
    placeCursor,
    moveCursor,
    bringIntoView,
    zoom: (factor: number, anchor = place.value) => show(zoomAround(shown.value, factor, anchor, frames)),
    pan: (share: number) => show(panBy(shown.value, share * windowSamples(shown.value), frames)),
    centre: (sample: number) => show(centreOn(shown.value, sample, frames)),
    showAround: (span: TimeWindow) => show(windowAround(span, frames)),
    showWhole: () => show(wholeWindow(frames)),
  };
}

export type BenchWindow = ReturnType<typeof useBenchWindow>;
