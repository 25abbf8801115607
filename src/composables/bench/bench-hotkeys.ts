import type { ClassChoice } from '@/composables/bench/class-keys.ts';
import { SLOW_FACTORS } from '@/composables/bench/listening.ts';
import { windowSamples } from '@/composables/bench/time-axis.ts';
import type { Bench } from '@/composables/bench/useBench.ts';
import type { Hotkey } from '@/composables/useHotkeys.ts';

export interface PageActions {
  showKeys: () => void;
  nextColours: () => void;
  editNote: () => void;
  /** For the live region. */
  say: (words: string) => void;
  /** Asked first, since some classes hold the recording. */
  chooseClass: (classKey: string, isLessSure: boolean) => void;
}

type Row = [id: string, combo: string, label: string, run: () => void, repeats?: boolean];

function toHotkeys(group: string, rows: readonly Row[]): Hotkey[] {
  return rows.map(([id, combo, label, run, repeats = false]) => ({
    id: `bench.${id}`,
    combo,
    label,
    group,
    repeats,
    run,
  }));
}

/** All keys of the bench: the left hand names classes, the right hand moves, plays and edits. */
export function benchHotkeys(bench: Bench, choices: readonly ClassChoice[], page: PageActions): Hotkey[] {
  const marking = bench.canMark
    ? [...classKeys(choices, page), ...toHotkeys('Edit the selected mark', editRows(bench, page))]
    : [];
  return [
    ...marking,
    ...toHotkeys('Go', goRows(bench, page)),
    ...toHotkeys('Zoom and move', viewRows(bench)),
    ...toHotkeys('Listen', listenRows(bench)),
    ...toHotkeys('Page', [
      ['colours', 'KeyH', 'next colours of the picture', page.nextColours],
      ['keys', 'sign:?', 'this sheet of keys', page.showKeys],
    ]),
  ];
}

function classKeys(choices: readonly ClassChoice[], page: PageActions): Hotkey[] {
  const withCode = choices.filter(({ code }) => code !== null);
  return withCode.flatMap(({ key, title, code }) =>
    toHotkeys('Set a mark, or change the one at the cursor', [
      [`class.${key}`, code ?? '', title, () => page.chooseClass(key, false)],
      [`class.${key}.less`, `Shift+${code}`, `${title}, less sure`, () => page.chooseClass(key, true)],
    ]),
  );
}

function editRows(bench: Bench, page: PageActions): Row[] {
  const step = () => Math.max(1, Math.round(windowSamples(bench.view.shown.value) / bench.plotWidthPx.value));
  const nudge = (edge: 'start' | 'end', direction: number) => () => {
    const mark = bench.marks.selected.value;
    if (!mark) return;
    bench.moveEdge(edge, (edge === 'start' ? mark.startSample : mark.endSample) + direction * step());
  };
  const removeSelected = () => {
    const mark = bench.marks.selected.value;
    if (mark) bench.marks.remove(mark.key);
  };
  return [
    ['start.earlier', 'Comma', 'start earlier, by a pixel or a sample', nudge('start', -1), true],
    ['start.later', 'Period', 'start later', nudge('start', 1), true],
    ['end.earlier', 'Shift+Comma', 'end earlier', nudge('end', -1), true],
    ['end.later', 'Shift+Period', 'end later', nudge('end', 1), true],
    ['note', 'KeyN', 'write a note', page.editNote],
    ['delete', 'Delete', 'delete', removeSelected],
    ['delete.back', 'Backspace', 'delete', removeSelected],
    ['undo', 'Control+KeyZ', 'take the last change back', bench.marks.undo, true],
    ['redo', 'Control+Shift+KeyZ', 'do it again', bench.marks.redo, true],
    ['redo.y', 'Control+KeyY', 'do it again', bench.marks.redo, true],
  ];
}

function goRows(bench: Bench, page: PageActions): Row[] {
  const { marks, candidates, selectedCandidate, markSample } = bench;
  const nextMark = (direction: 1 | -1) => () => {
    const from = marks.selected.value;
    const next = neighbour(
      marks.marks.value,
      (mark) => mark.startSample,
      from?.startSample ?? markSample.value,
      direction,
    );
    if (next) bench.selectMark(next.key);
    else page.say(direction > 0 ? 'No mark after this' : 'No mark before this');
  };
  const nextCandidate = (direction: 1 | -1) => () => {
    if (candidates.density.value) return page.say('Too many candidates in view: zoom in');
    const at = selectedCandidate.value?.onsetSample ?? markSample.value;
    const next = neighbour(candidates.candidates.value, (one) => one.onsetSample, at, direction);
    if (next) bench.selectCandidate(next);
    else page.say('No further candidate in view');
  };
  const rows: Row[] = [
    ['mark.next', 'KeyL', 'next mark', nextMark(1), true],
    ['mark.previous', 'KeyJ', 'previous mark', nextMark(-1), true],
    ['clear', 'Escape', 'let go of the selection, stop playing', bench.dropAll],
  ];
  if (!bench.areCandidatesShown) return rows;
  return [
    ...rows,
    ['candidate.next', 'KeyO', 'next candidate in view', nextCandidate(1), true],
    ['candidate.previous', 'KeyU', 'previous candidate in view', nextCandidate(-1), true],
  ];
}

function neighbour<Item>(
  items: readonly Item[],
  placeOf: (item: Item) => number,
  at: number,
  direction: 1 | -1,
): Item | undefined {
  if (direction > 0) return items.find((item) => placeOf(item) > at);
  return items.findLast((item) => placeOf(item) < at);
}

function viewRows({ view, marks, selectedCandidate, plotWidthPx }: Bench): Row[] {
  const showSelected = () => {
    const mark = marks.selected.value;
    const candidate = selectedCandidate.value;
    if (mark) view.showAround(mark);
    else if (candidate)
      view.showAround({ startSample: candidate.onsetSample, endSample: candidate.endSample });
  };
  const onePixel = () => 1 / plotWidthPx.value;
  return [
    ['cursor.left', 'ArrowLeft', 'cursor to the left', () => view.moveCursor(-0.02), true],
    ['cursor.right', 'ArrowRight', 'cursor to the right', () => view.moveCursor(0.02), true],
    ['cursor.left.fine', 'Shift+ArrowLeft', 'by one pixel', () => view.moveCursor(-onePixel()), true],
    ['cursor.right.fine', 'Shift+ArrowRight', 'by one pixel', () => view.moveCursor(onePixel()), true],
    ['zoom.in', 'ArrowUp', 'closer, around the cursor', () => view.zoom(1 / 2), true],
    ['zoom.out', 'ArrowDown', 'further away', () => view.zoom(2), true],
    ['pan.left', 'PageUp', 'earlier by most of the window', () => view.pan(-0.8), true],
    ['pan.right', 'PageDown', 'later by most of the window', () => view.pan(0.8), true],
    ['zoom.selected', 'KeyI', 'closer to the selected mark or candidate', showSelected],
    ['zoom.whole', 'Digit0', 'the whole recording', view.showWhole],
  ];
}

function listenRows({ listening, view, marks, selectedCandidate, markSample }: Bench): Row[] {
  const toggle = () => {
    if (listening.isPlaying.value) return listening.stop();
    const { startSample, endSample } = view.shown.value;
    const from = Math.max(startSample, Math.min(markSample.value, endSample - 1));
    void listening.play({ startSample: from, endSample });
  };
  const playSelected = () => {
    const mark = marks.selected.value;
    const candidate = selectedCandidate.value;
    const span =
      mark ?? (candidate && { startSample: candidate.onsetSample, endSample: candidate.endSample });
    if (!span) return;
    const room = (span.endSample - span.startSample) / 2;
    void listening.play({
      startSample: Math.max(0, span.startSample - room),
      endSample: span.endSample + room,
    });
  };
  const shift = (direction: 1 | -1) => () => {
    const at = SLOW_FACTORS.indexOf(listening.slow.value) + direction;
    listening.slow.value = SLOW_FACTORS[Math.min(SLOW_FACTORS.length - 1, Math.max(0, at))] ?? 1;
  };
  return [
    ['play', 'Space', 'play from the cursor, stop', toggle],
    ['play.selected', 'KeyP', 'play the selected mark or candidate', playSelected],
    ['slower', 'Minus', 'slower', shift(1)],
    ['faster', 'Equal', 'faster', shift(-1)],
    ['loop', 'KeyK', 'repeat, or not', () => (listening.isLooping.value = !listening.isLooping.value)],
  ];
}
