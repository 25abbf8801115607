import type { PageActions, Row } from '@/composables/bench/keys/hotkey-rows.ts';
import { topFrequency } from '@/composables/bench/unseen-bands.ts';
import type { Bench } from '@/composables/bench/useBench.ts';

/** What is seen of the sound: colours, channels, the height of the cursor, the panel of a region. */
export function pictureRows({ view, layout, channels, region }: Bench, page: PageActions): Row[] {
  const topHz = topFrequency(layout.sampleRateHz);
  const raise = (share: number) => () => {
    const from = view.cursorHz.value ?? topHz / 2;
    view.cursorHz.value = Math.min(topHz, Math.max(0, from + share * topHz));
    view.placeCursor(view.place.value);
  };
  const rows: Row[] = [
    ['colours', 'KeyH', 'next colours of the picture', page.nextColours],
    ['quiet', 'Shift+KeyH', 'levels over the quiet, or as they are', page.otherView],
    ['cursor.up', 'Shift+ArrowUp', 'read the level higher up', raise(0.01), true],
    ['cursor.down', 'Shift+ArrowDown', 'read the level lower down', raise(-0.01), true],
    ['region', 'KeyM', 'spectrum and levels of the span in hand', region.toggle],
  ];
  if (channels.count < 2) return rows;
  const step = (by: 1 | -1) => () => {
    channels.step(by);
    page.say(`Channel ${channels.channel.value + 1}`);
  };
  return [
    ...rows,
    ['channel.next', 'Shift+PageDown', 'next channel', step(1)],
    ['channel.previous', 'Shift+PageUp', 'previous channel', step(-1)],
    [
      'channel.stack',
      'Backslash',
      'channels under one another, or one alone',
      () => (channels.isStacked.value = !channels.isStacked.value),
    ],
  ];
}
