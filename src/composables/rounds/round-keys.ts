import { toHotkeys } from '@/composables/bench/keys/hotkey-rows.ts';
import type { Row } from '@/composables/bench/keys/hotkey-rows.ts';
import type { Bench } from '@/composables/bench/useBench.ts';
import type { Round } from '@/composables/rounds/useRound.ts';
import type { Hotkey } from '@/composables/useHotkeys.ts';

export const ROUND_KEYS = {
  none: 'KeyJ',
  same: 'KeyL',
  undecided: 'Semicolon',
  back: 'KeyU',
  on: 'KeyO',
  group: 'Shift+KeyL',
} as const;

const ANSWERS = 'Answer the candidate';

/**
 * The keys of the bench in a round. The left hand says what a candidate is, the right forefinger lies on "no event"; keys that
 * go from mark to mark make room for those that go from candidate to candidate. What the pass of rounds brings comes first.
 */
export function withRoundKeys(hotkeys: readonly Hotkey[], bench: Bench, round: Round): Hotkey[] {
  const own = [...toHotkeys(ANSWERS, answerRows(round)), ...toHotkeys('Edit', undoRows(bench, round))];
  const taken = new Set(own.map(({ combo }) => combo));
  const others = hotkeys
    .filter(({ combo }) => !taken.has(combo))
    .map((hotkey) => (hotkey.id.startsWith('bench.class.') ? { ...hotkey, group: ANSWERS } : hotkey));
  return [...own, ...others];
}

function answerRows(round: Round): Row[] {
  return [
    ['round.none', ROUND_KEYS.none, 'no event', round.noEvent],
    ['round.same', ROUND_KEYS.same, 'the same as the last answer', round.sameAsLast],
    ['round.group', ROUND_KEYS.group, 'the rest of the look-alikes, as their spot checks', round.answerRest],
    ['round.undecided', ROUND_KEYS.undecided, 'undecided', round.undecidedNow],
    ['round.back', ROUND_KEYS.back, 'back to the candidate before', () => void round.back(), true],
    ['round.on', ROUND_KEYS.on, 'on, without an answer', () => void round.on(), true],
  ];
}

/** Takes back what was done last, an answer or a change of a mark. */
function undoRows({ marks }: Bench, round: Round): Row[] {
  const undo = () => {
    const isAnswerNewer =
      (round.lastStep.value?.atMs ?? 0) >= (marks.history.value.find(({ isDone }) => isDone)?.atMs ?? 0);
    if (!isAnswerNewer || !round.undo()) marks.undo();
  };
  const redo = () => {
    if (!round.redo()) marks.redo();
  };
  return [
    ['round.undo', 'Control+KeyZ', 'take the last answer, or the last change, back', undo, true],
    ['round.redo', 'Control+Shift+KeyZ', 'do it again', redo, true],
    ['round.redo.y', 'Control+KeyY', 'do it again', redo, true],
  ];
}
