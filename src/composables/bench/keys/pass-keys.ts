import type { PageActions, Row } from '@/composables/bench/keys/hotkey-rows.ts';
import type { Bench } from '@/composables/bench/useBench.ts';

/** Through the part of a pass: what was not seen yet, and from window to window. */
export function passRows({ coverage }: Bench, page: PageActions): Row[] {
  if (!coverage.isKept) return [];
  const toUnseen = () => {
    if (!coverage.goToUnseen()) page.say('Everything that this pass is of has been seen');
  };
  const toWindow = (direction: 1 | -1) => () => {
    const number = coverage.goToWindow(direction);
    if (number !== null) page.say(`Window ${number} of ${coverage.windows?.length ?? 0}`);
  };
  const rows: Row[] = [['unseen', 'Semicolon', 'next part not seen', toUnseen, true]];
  if (coverage.windows === null) return rows;
  return [
    ...rows,
    ['window.next', 'Quote', 'next window of the pass', toWindow(1), true],
    ['window.previous', 'Shift+Quote', 'previous window of the pass', toWindow(-1), true],
  ];
}
