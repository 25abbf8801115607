import { tryOnScopeDispose, useEventListener, useIntervalFn } from '@vueuse/core';
import { v7 as newId } from 'uuid';
import { computed, ref, shallowRef } from 'vue';
import type { Ref } from 'vue';
import type { CoverageSpan } from '@shared/contract/coverage.ts';
import type { Pass } from '@shared/contract/passes.ts';
import type { TileLayout } from '@shared/contract/views.ts';
import {
  coarsestSamplesPerPixel,
  coveredShare,
  shareCovered,
  uncovered,
  zoomStep,
} from '@shared/domain/coverage-rule.ts';
import type { CoveredSpan } from '@shared/domain/coverage-rule.ts';
import { partOfPass } from '@shared/domain/pass-windows.ts';
import type { SampleSpan } from '@shared/domain/event-span.ts';
import { intersectSpans, toSpanSet } from '@shared/domain/span-set.ts';
import { addCoverage, getCoverage } from '@/api/coverage.ts';
import type { BenchChannels } from '@/composables/bench/useChannels.ts';
import { windowSamples } from '@/composables/bench/time-axis.ts';
import type { BenchWindow } from '@/composables/bench/useBenchWindow.ts';
import { createCoverageOutbox, sendLeftBehind } from '@/composables/pass/coverage-outbox.ts';
import { createKeptCoverage } from '@/composables/pass/kept-coverage.ts';
import { firstScreen, neighbourWindow, nextUnseen } from '@/composables/pass/pass-part.ts';

export interface CoverageOptions {
  pass: Pass | null;
  canMark: boolean;
  layout: TileLayout;
  view: BenchWindow;
  channels: Pick<BenchChannels, 'channel' | 'shown' | 'choose'>;
  /** Width of the plot in CSS pixels: what the eye can part. */
  plotWidthPx: Ref<number>;
  /** Whether everything of the part shown has been drawn. */
  isDrawn: () => boolean;
  listening: Listening;
}

interface Listening {
  isPlaying: Readonly<Ref<boolean>>;
  playheadSample: Readonly<Ref<number | null>>;
  slow: Readonly<Ref<number>>;
  /** Tells each stretch that was played; without it the playhead is followed. */
  onHeard?: (listener: (heard: HeardSpan) => void) => () => void;
}

interface HeardSpan extends SampleSpan {
  channel: number;
  aids: { slow: number };
}

export type BenchCoverage = ReturnType<typeof useCoverage>;

const LOOK_EVERY_MS = 300;
const REST_MS = 600;
const SEND_EVERY_MS = 5000;

/** What of the part of a pass has been seen and heard; a pass of rounds has no part. Nothing here waits for the server, and nothing waits for it. */
export function useCoverage(options: CoverageOptions) {
  const { pass, canMark, layout, view, plotWidthPx, listening } = options;
  const { channel, shown: shownChannels, choose } = options.channels;
  const { frames, channels, sampleRateHz } = layout;
  const windows = pass?.windows ?? null;
  const part = partOfPass(windows, frames);
  const isKept = canMark && pass?.task === 'events' && pass.kind !== 'rounds';
  const gathered = shallowRef<readonly CoverageSpan[]>([]);
  const isLoaded = ref(!isKept);
  const kept = { personId: pass?.labelerId ?? '', passId: pass?.id ?? '', windowId: newId() };
  const send = (passId: string, spans: CoverageSpan[]) => addCoverage(passId, spans, kept.personId);
  const outbox = createCoverageOutbox({
    ...createKeptCoverage(kept, localStorage),
    send: (spans) => send(kept.passId, spans),
  });
  let restingSince = 0;
  let rested = { shown: view.shown.value, channels: shownChannels.value };
  let heardUpTo: number | null = null;

  const ofWay = (way: CoverageSpan['way']) => gathered.value.filter((span) => span.way === way);
  const seen = computed(() => joinByChannel(ofWay('seen'), channels));
  const heard = computed(() => joinByChannel(ofWay('heard'), channels));
  const extent = { part, channels };
  const shares = computed(() => ({
    seenShare: shareCovered(seen.value, extent),
    heardShare: shareCovered(heard.value, extent),
  }));
  const left = computed(() => uncovered(seen.value, extent));
  const isCovered = computed(() => shares.value.seenShare >= coveredShare);
  const samplesPerPixel = computed(() => windowSamples(view.shown.value) / Math.max(1, plotWidthPx.value));
  const isCloseEnough = computed(() => samplesPerPixel.value <= coarsestSamplesPerPixel(sampleRateHz));

  function note(
    way: CoverageSpan['way'],
    span: SampleSpan,
    facts: { detail: number; in: readonly number[] },
  ): void {
    const startSample = Math.max(0, Math.floor(span.startSample));
    const endSample = Math.min(frames, Math.ceil(span.endSample));
    const pieces = intersectSpans([{ startSample, endSample }], part);
    const spans = facts.in.flatMap((one) =>
      pieces.map((piece) => ({ ...piece, way, channel: one, detail: facts.detail })),
    );
    if (spans.length === 0) return;
    outbox.add(spans);
    gathered.value = [...joinByWay(gathered.value), ...spans];
  }

  function look(nowMs: number): void {
    const shown = view.shown.value;
    const isSame = rested.shown === shown && rested.channels === shownChannels.value;
    rested = { shown, channels: shownChannels.value };
    if (!isSame || document.visibilityState !== 'visible' || !options.isDrawn()) {
      restingSince = nowMs;
      return;
    }
    if (nowMs - restingSince < REST_MS || !isCloseEnough.value) return;
    const detail = zoomStep(samplesPerPixel.value, sampleRateHz);
    note('seen', shown, { detail, in: shownChannels.value });
    // Once is enough, until something moves.
    restingSince = Number.POSITIVE_INFINITY;
  }

  function hear(): void {
    const at = listening.isPlaying.value ? listening.playheadSample.value : null;
    const from = heardUpTo;
    heardUpTo = at;
    const most = (2 * LOOK_EVERY_MS * sampleRateHz) / 1000;
    if (at !== null && from !== null && at > from && at - from < most)
      note(
        'heard',
        { startSample: from, endSample: at },
        { detail: listening.slow.value, in: [channel.value] },
      );
  }

  function goTo(span: CoveredSpan | undefined): boolean {
    if (!span) return false;
    choose(span.channel);
    const screen = firstScreen(span, coarsestSamplesPerPixel(sampleRateHz) * plotWidthPx.value);
    view.show(screen);
    view.placeCursor((screen.startSample + screen.endSample) / 2);
    return true;
  }

  /** False where nothing is left. */
  const goToUnseen = () => goTo(nextUnseen(left.value, channel.value, view.shown.value.startSample));

  function goToWindow(direction: 1 | -1): number | null {
    const next = windows && neighbourWindow(windows, view.place.value, direction);
    if (!next) return null;
    goTo({ ...next, channel: channel.value });
    return next.stratum + 1;
  }

  if (isKept) {
    gathered.value = outbox.all();
    void sendLeftBehind(kept, send, localStorage);
    void getCoverage(pass.id)
      .then((stored) => (gathered.value = [...stored, ...gathered.value]))
      // Without it the ribbon begins empty; what is gathered from here on is stored all the same.
      .catch(() => undefined)
      .finally(() => (isLoaded.value = true));
    useIntervalFn(() => look(performance.now()), LOOK_EVERY_MS);
    const stopHearing = listening.onHeard?.((span) =>
      note('heard', span, { detail: span.aids.slow, in: [span.channel] }),
    );
    if (stopHearing) tryOnScopeDispose(stopHearing);
    else useIntervalFn(hear, LOOK_EVERY_MS);
    useIntervalFn(() => void outbox.flush(), SEND_EVERY_MS);
    useEventListener(window, 'online', () => void outbox.flush());
    tryOnScopeDispose(() => void outbox.flush());
  }

  return {
    isKept,
    isLoaded,
    part,
    windows,
    seen,
    heard,
    shares,
    left,
    isCovered,
    isCloseEnough,
    goTo,
    goToUnseen,
    goToWindow,
    flush: outbox.flush,
  };
}

function joinByChannel(spans: readonly CoverageSpan[], channels: number): CoveredSpan[] {
  return Array.from({ length: channels }, (_, channel) =>
    toSpanSet(spans.filter((span) => span.channel === channel)).map((span) => ({ ...span, channel })),
  ).flat();
}

/** For showing, zooms and speeds do not matter: fewer spans to go through. */
function joinByWay(spans: readonly CoverageSpan[]): CoverageSpan[] {
  const channels = Math.max(0, ...spans.map((span) => span.channel)) + 1;
  return (['seen', 'heard'] as const).flatMap((way) =>
    joinByChannel(
      spans.filter((span) => span.way === way),
      channels,
    ).map((span) => ({ ...span, way, detail: 1 })),
  );
}
