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

/** Whether the key has something to act on: the sheet leaves out the others. */
export function hasPhaseUse(id: string, { beside }: Pick<Bench, 'beside'>): boolean {
  const { phases, videos } = beside;
  if (id === 'bench.film') return videos.items.value.length > 0;
  const isForNew = id === 'bench.phase.start' || id === 'bench.phase.end';
  return isForNew ? phases.canAdd.value : phases.items.value.length > 0;
}
