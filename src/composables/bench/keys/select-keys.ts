import type { PageActions, Row } from '@/composables/bench/keys/hotkey-rows.ts';
import { neighbour } from '@/composables/bench/keys/go-keys.ts';
import type { Bench } from '@/composables/bench/useBench.ts';

/** More marks than one in hand, and the way to send one to somebody. */
export function selectRows({ marks, markSample, hand, view }: Bench, page: PageActions): Row[] {
  const extend = (direction: 1 | -1) => () => {
    const from = marks.selected.value?.startSample ?? markSample.value;
    const next = neighbour(marks.marks.value, (mark) => mark.startSample, from, direction);
    if (!next) return page.say(direction > 0 ? 'No mark after this' : 'No mark before this');
    marks.selectMany([...marks.selectedKeys.value, next.key], next.key);
    view.bringIntoView(next);
    view.placeCursor(next.startSample);
  };
  return [
    ['select.next', 'Shift+KeyL', 'next mark as well', extend(1), true],
    ['select.previous', 'Shift+KeyJ', 'previous mark as well', extend(-1), true],
    ['select.view', 'Control+KeyA', 'all marks in view', hand.selectInView],
    ['table', 'Backquote', 'into the table of marks', page.showTable],
    ['link', 'Control+Alt+KeyL', 'copy a link to the selected mark', page.copyLink],
  ];
}
