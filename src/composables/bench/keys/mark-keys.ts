import type { ClassChoice } from '@/composables/bench/class-keys.ts';
import { toHotkeys } from '@/composables/bench/keys/hotkey-rows.ts';
import type { PageActions, Row } from '@/composables/bench/keys/hotkey-rows.ts';
import type { Bench } from '@/composables/bench/useBench.ts';
import type { Hotkey } from '@/composables/useHotkeys.ts';

export function classKeys(choices: readonly ClassChoice[], page: PageActions): Hotkey[] {
  const withCode = choices.filter(({ code }) => code !== null);
  return withCode.flatMap(({ key, title, code }) => {
    const [sure, less] = toHotkeys('Set a mark, or change the one at the cursor', [
      [`class.${key}`, code ?? '', title, () => page.chooseClass(key, false)],
      [`class.${key}.less`, `Shift+${code}`, `${title}, less sure`, () => page.chooseClass(key, true)],
    ]);
    return sure && less ? [sure, { ...less, withShiftOf: sure.id }] : [];
  });
}

/** What is done to the marks in hand. */
export function editRows(bench: Bench, page: PageActions): Row[] {
  const { hand, marks } = bench;
  return [
    ['sure', 'Digit1', 'confidence: sure', () => hand.setConfidence('sure')],
    ['probable', 'Digit2', 'confidence: probable', () => hand.setConfidence('probable')],
    ['doubtful', 'Digit3', 'confidence: unsure', () => hand.setConfidence('unsure')],
    ['note', 'KeyN', 'write a note', page.editNote],
    ['split', 'Slash', 'split at the cursor', hand.splitAtCursor],
    ['merge', 'Shift+KeyM', 'make one of the selected marks', hand.mergeSelected],
    ['delete', 'Delete', 'delete', hand.removeSelected],
    ['undo', 'Control+KeyZ', 'take the last change back', marks.undo, true],
    ['redo', 'Control+Shift+KeyZ', 'do it again', marks.redo, true],
    ['steps', 'Control+Alt+KeyZ', 'list of the last changes', page.showSteps],
  ];
}

/** Second keys for the same, as people have them in their fingers from elsewhere. */
export function secondRows({ hand, marks }: Bench): Row[] {
  return [
    ['delete.back', 'Backspace', 'delete', hand.removeSelected],
    ['redo.y', 'Control+KeyY', 'do it again', marks.redo, true],
  ];
}

/** Where a mark begins and ends. */
export function placeRows({ hand, snapping, marks }: Bench, page: PageActions): Row[] {
  const selectedKeys = () => [...marks.selectedKeys.value];
  const switchSnap = () => {
    snapping.snapsNew.value = !snapping.snapsNew.value;
    page.say(
      snapping.snapsNew.value ? 'New marks go to the picked onset' : 'New marks stay where they are set',
    );
  };
  return [
    ['snap', 'KeyY', 'start at the picked onset', () => void snapping.snap(selectedKeys())],
    ['snap.back', 'Shift+KeyY', 'start back where I put it', () => snapping.unsnap(selectedKeys())],
    ['snap.new', 'Control+Alt+KeyY', 'new marks at the picked onset, or not', switchSnap],
    ['start.earlier', 'Comma', 'start earlier', () => hand.nudge('start', -1), true],
    ['start.later', 'Period', 'start later', () => hand.nudge('start', 1), true],
    ['end.earlier', 'Shift+Comma', 'end earlier', () => hand.nudge('end', -1), true],
    ['end.later', 'Shift+Period', 'end later', () => hand.nudge('end', 1), true],
    ['whole.earlier', 'Alt+Comma', 'whole mark earlier', () => hand.nudge('whole', -1), true],
    ['whole.later', 'Alt+Period', 'whole mark later', () => hand.nudge('whole', 1), true],
    ['nudge.unit', 'Shift+Semicolon', 'step: pixel, sample, millisecond', hand.cycleUnit],
  ];
}
