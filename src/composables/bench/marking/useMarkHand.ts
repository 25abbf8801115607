import { useLocalStorage } from '@vueuse/core';
import { computed } from 'vue';
import type { Ref } from 'vue';
import { v7 as newId } from 'uuid';
import type { Confidence } from '@shared/contract/schemes.ts';
import { fieldsOf } from '@/composables/bench/mark.ts';
import type { BenchMark, MarkFields } from '@/composables/bench/mark.ts';
import { markName, severalName } from '@/composables/bench/mark-words.ts';
import {
  fittedShift,
  mergeFault,
  mergeMarks,
  movedSpan,
  splitMark,
} from '@/composables/bench/marking/mark-edits.ts';
import type { Edge, MarkPart } from '@/composables/bench/marking/mark-edits.ts';
import { nextUnit, nudgeSamples } from '@/composables/bench/marking/nudge-step.ts';
import type { NudgeUnit } from '@/composables/bench/marking/nudge-step.ts';
import type { Circumstances } from '@/composables/bench/marking/useCircumstances.ts';
import type { BenchMarks } from '@/composables/bench/useBenchMarks.ts';
import type { BenchWindow } from '@/composables/bench/useBenchWindow.ts';
import type { MarkRoom } from '@/composables/pass/mark-room.ts';
import { useAnnounce } from '@/composables/useAnnounce.ts';

export interface MarkHandParts {
  frames: number;
  sampleRateHz: number;
  /** The one that is shown. */
  channel: Ref<number>;
  view: BenchWindow;
  marks: BenchMarks;
  markSample: Ref<number>;
  plotWidthPx: Ref<number>;
  circumstances: Circumstances;
  room: MarkRoom;
}

const EDGE_WORDS = 'A mark begins inside its window: it stops at the edge';

/** What is done to the marks in hand, one or several: each is one step that can be taken back. */
export function useMarkHand(parts: MarkHandParts) {
  const { frames, sampleRateHz, view, marks, markSample, plotWidthPx, circumstances, room } = parts;
  const { announce } = useAnnounce();
  const nudgeUnit = useLocalStorage<NudgeUnit>('recalesce.bench.nudge', 'pixel');
  const stepSamples = computed(() =>
    nudgeSamples(nudgeUnit.value, { window: view.shown.value, widthPx: plotWidthPx.value, sampleRateHz }),
  );
  const own = computed(() => marks.selectedMarks.value.filter(({ isOwn }) => isOwn));
  const ownKeys = () => own.value.map(({ key }) => key);

  /** A start that was moved by hand is where the person put it, and known as well as this zoom allows. */
  function placed(mark: BenchMark, span: Partial<MarkFields>): Partial<MarkFields> {
    const isMoved = span.startSample !== undefined && span.startSample !== mark.startSample;
    return isMoved ? { ...span, ...circumstances.placedNow() } : span;
  }

  function moveEdge(edge: Edge, sample: number): void {
    const mark = marks.selected.value;
    if (!mark) return;
    const from = edge === 'start' ? mark.startSample : mark.endSample;
    const span = moved(mark, edge, sample - from);
    marks.change(mark.key, placed(mark, span), edge);
    if (edge === 'start') tellOfEdge(sample, span.startSample);
  }

  const moved = (mark: BenchMark, part: MarkPart, samples: number) =>
    movedSpan(mark, part, samples, frames, room.around(mark.startSample));

  function tellOfEdge(wantedSample: number, startSample: number): void {
    if (wantedSample !== startSample && room.isOutside(wantedSample)) void announce(EDGE_WORDS);
  }

  /** Several marks keep their distances, unless only an edge of each is moved. */
  function nudge(part: MarkPart, direction: 1 | -1): void {
    const samples = direction * stepSamples.value;
    const shift = part === 'whole' ? fittedShift(own.value, samples, frames, room.around) : samples;
    const values = (mark: BenchMark) => placed(mark, moved(mark, part, shift));
    const starts = own.value.map(({ startSample }) => startSample);
    if (part === 'whole') marks.changeAll(ownKeys(), values, 'move', (marked) => `${marked} moved`);
    else marks.changeAll(ownKeys(), values, part);
    if (part !== 'end' && starts.some((start) => room.isOutside(start + samples))) void announce(EDGE_WORDS);
  }

  function cycleUnit(): void {
    nudgeUnit.value = nextUnit(nudgeUnit.value);
    void announce(`Edges move by a ${nudgeUnit.value}`);
  }

  function setConfidence(confidence: Confidence): void {
    if (marks.changeAll(ownKeys(), () => ({ confidence }), 'confidence'))
      void announce(`${severalName(own.value, marks.speech)}: ${confidence}`);
  }

  function setClass(classKey: string): void {
    marks.changeAll(ownKeys(), () => ({ classKey }), 'class');
  }

  function splitAtCursor(): void {
    const mark = marks.selected.value;
    const halves = mark?.isOwn ? splitMark(fieldsOf(mark), markSample.value) : null;
    if (!mark || !halves) return void announce('Put the cursor inside a selected mark of yours to split it');
    const [earlier, later] = halves;
    const key = newId();
    const edits = [
      { key: mark.key, after: earlier },
      { key, after: { ...later, ...circumstances.placedNow(), aids: circumstances.aidsInUse() } },
    ];
    const name = `${markName(mark, marks.speech)} split in two`;
    if (!marks.apply({ name, what: 'split', edits })) return;
    marks.selectMany([mark.key, key]);
    void announce(name);
  }

  function mergeSelected(): void {
    const fault = mergeFault(own.value);
    const merged = fault === null ? mergeMarks(own.value) : null;
    const [first, ...rest] = own.value;
    if (!merged || !first) return void announce(fault ?? '');
    const name = `${own.value.length} marks made one`;
    const gone = rest.map(({ key }) => ({ key, after: null }));
    if (!marks.apply({ name, what: 'merge', edits: [{ key: first.key, after: merged }, ...gone] })) return;
    marks.selectedKey.value = first.key;
    void announce(name);
  }

  /** Those of which something is in the window. */
  function selectInView(): void {
    const { startSample, endSample } = view.shown.value;
    selectBetween(startSample, endSample);
  }

  function selectBetween(fromSample: number, toSample: number, isAdding = false): void {
    const inside = marks.marks.value.filter(
      (mark) =>
        mark.channel === parts.channel.value && mark.startSample < toSample && mark.endSample > fromSample,
    );
    const kept = isAdding ? [...marks.selectedKeys.value] : [];
    marks.selectMany([...new Set([...kept, ...inside.map(({ key }) => key)])]);
  }

  return {
    nudgeUnit,
    stepSamples,
    ownSelected: own,
    placed,
    moveEdge,
    nudge,
    cycleUnit,
    setConfidence,
    setClass,
    splitAtCursor,
    mergeSelected,
    canMerge: computed(() => mergeFault(own.value) === null),
    selectInView,
    selectBetween,
    removeSelected: () => marks.removeAll(ownKeys()),
  };
}
