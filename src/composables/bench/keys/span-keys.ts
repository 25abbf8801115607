import type { Row } from '@/composables/bench/keys/hotkey-rows.ts';
import type { Bench } from '@/composables/bench/useBench.ts';

/** What is played, repeated, measured or taken for the noise can be drawn without a pointer. */
export function spanRows({ drawn }: Bench): Row[] {
  return [
    ['span.start', 'Alt+BracketLeft', 'a drawn span starts at the cursor', drawn.startHere],
    ['span.end', 'Alt+BracketRight', 'it ends at the cursor', drawn.endHere],
  ];
}
