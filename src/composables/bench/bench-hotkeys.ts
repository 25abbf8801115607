import type { ClassChoice } from '@/composables/bench/class-keys.ts';
import { goRows } from '@/composables/bench/keys/go-keys.ts';
import { toHotkeys } from '@/composables/bench/keys/hotkey-rows.ts';
import type { PageActions } from '@/composables/bench/keys/hotkey-rows.ts';
import { listenRows } from '@/composables/bench/keys/listen-keys.ts';
import { classKeys, editRows, placeRows, secondRows } from '@/composables/bench/keys/mark-keys.ts';
import { hasPhaseUse, phaseRows } from '@/composables/bench/keys/phase-keys.ts';
import { pictureRows } from '@/composables/bench/keys/picture-keys.ts';
import { passRows } from '@/composables/bench/keys/pass-keys.ts';
import { selectRows } from '@/composables/bench/keys/select-keys.ts';
import { spanRows } from '@/composables/bench/keys/span-keys.ts';
import { viewRows } from '@/composables/bench/keys/view-keys.ts';
import type { Bench } from '@/composables/bench/useBench.ts';
import type { Hotkey } from '@/composables/useHotkeys.ts';

/**
 * All keys of the bench: the left hand names classes, the right hand moves, plays and edits. A part of the bench has its
 * rows in a file of its own beside the others; a test holds that no two of them clash.
 */
export function benchHotkeys(bench: Bench, choices: readonly ClassChoice[], page: PageActions): Hotkey[] {
  const marking = bench.canMark
    ? [
        ...classKeys(choices, page),
        ...toHotkeys('Change the marks in hand', editRows(bench, page)),
        ...toHotkeys('Start and end of the marks in hand', placeRows(bench, page)),
        ...toHotkeys('', secondRows(bench)).map((hotkey) => ({ ...hotkey, isSecond: true })),
      ]
    : [];
  return [
    ...marking,
    ...toHotkeys('Go', goRows(bench, page)),
    ...toHotkeys('Through the pass', passRows(bench, page)),
    ...toHotkeys('Select and tell', selectRows(bench, page)),
    ...toHotkeys('Draw a span', spanRows(bench)),
    ...toHotkeys('Zoom and move', viewRows(bench)),
    ...toHotkeys('Picture', pictureRows(bench, page)),
    ...toHotkeys('Listen', listenRows(bench)),
    ...toHotkeys('Growth phases and film', phaseRows(bench)).map((hotkey) => ({
      ...hotkey,
      isListed: () => hasPhaseUse(hotkey.id, bench),
    })),
    ...toHotkeys('Page', [['keys', 'sign:?', 'this sheet of keys', page.showKeys]]),
  ];
}
