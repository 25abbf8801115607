import type { ClassChoice } from '@/composables/bench/class-keys.ts';
import { toHotkeys } from '@/composables/bench/keys/hotkey-rows.ts';
import type { PageActions, Row } from '@/composables/bench/keys/hotkey-rows.ts';
import { windowSamples } from '@/composables/bench/time-axis.ts';
import type { Bench } from '@/composables/bench/useBench.ts';
import type { Hotkey } from '@/composables/useHotkeys.ts';

export function classKeys(choices: readonly ClassChoice[], page: PageActions): Hotkey[] {
  const withCode = choices.filter(({ code }) => code !== null);
  return withCode.flatMap(({ key, title, code }) =>
    toHotkeys('Set a mark, or change the one at the cursor', [
      [`class.${key}`, code ?? '', title, () => page.chooseClass(key, false)],
      [`class.${key}.less`, `Shift+${code}`, `${title}, less sure`, () => page.chooseClass(key, true)],
    ]),
  );
}

export function editRows(bench: Bench, page: PageActions): Row[] {
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
