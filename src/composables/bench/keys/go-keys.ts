import type { PageActions, Row } from '@/composables/bench/keys/hotkey-rows.ts';
import type { Bench } from '@/composables/bench/useBench.ts';

export function goRows(bench: Bench, page: PageActions): Row[] {
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

export function neighbour<Item>(
  items: readonly Item[],
  placeOf: (item: Item) => number,
  at: number,
  direction: 1 | -1,
): Item | undefined {
  if (direction > 0) return items.find((item) => placeOf(item) > at);
  return items.findLast((item) => placeOf(item) < at);
}
