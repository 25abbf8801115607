import type { Row } from '@/composables/bench/keys/hotkey-rows.ts';
import type { Bench } from '@/composables/bench/useBench.ts';

/** Growth phases on the axis of the run; none where the server keeps them back, or nothing may be added. */
export function phaseRows({ beside }: Pick<Bench, 'beside'>): Row[] {
  const { marking, phases, cursorNs, videos, filmPlace } = beside;
  const toggleFilm = () => {
    if (videos.items.value.length > 0) filmPlace.value = filmPlace.value === 'closed' ? 'beside' : 'closed';
  };
  const whenAllowed = (run: () => void) => () => {
    if (phases.canAdd.value) run();
  };
  return [
    [
      'phase.start',
      'BracketLeft',
      'a phase starts at the cursor',
      whenAllowed(() => marking.startHere(cursorNs.value)),
    ],
    [
      'phase.end',
      'BracketRight',
      'it ends at the cursor',
      whenAllowed(() => void marking.endHere(cursorNs.value)),
    ],
    ['phase.next', 'Shift+BracketRight', 'next phase', () => marking.step(1)],
    ['phase.previous', 'Shift+BracketLeft', 'previous phase', () => marking.step(-1)],
    ['film', 'Digit5', 'show the film, or close it', toggleFilm],
  ];
}
