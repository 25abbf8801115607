import type { ChannelRow, StagePlaces } from '@/composables/bench/stage-places.ts';
import { WORD_FONT } from '@/components/bench/useCanvas.ts';
import type { Palette } from '@/theme/palette.ts';

const BAR_PX = 4;
const INSET_PX = 8;
const PLATE_PX = 18;
/** Under the strokes of marks at the upper edge of a row, where the row is high enough. */
const UNDER_STROKES_PX = 16;
const ROOM_FOR_BOTH_PX = 70;

/** People count channels from 1. */
export function channelName(channel: number): string {
  return `channel ${channel + 1}`;
}

/** Whose row it is, the hearing line between its bands, and a bar and words where marks go. */
export function drawRowName(
  context: CanvasRenderingContext2D,
  row: ChannelRow,
  { places, colours }: { places: StagePlaces; colours: Palette },
): void {
  const isChosen = row.channel === places.channel;
  context.fillStyle = colours.glowFill;
  context.fillRect(places.gutterPx, row.lineTopPx + 1, places.plotWidthPx, row.lineHeightPx - 2);
  const text = isChosen ? `${channelName(row.channel)}, marks go here` : channelName(row.channel);
  context.font = WORD_FONT;
  const width = context.measureText(text).width + 2 * INSET_PX;
  const left = places.gutterPx + (isChosen ? BAR_PX : 0);
  context.fillStyle = isChosen ? colours.ink : colours.paper;
  const top = row.topPx + (row.heightPx >= ROOM_FOR_BOTH_PX ? UNDER_STROKES_PX : 0);
  context.fillRect(left, top, width, PLATE_PX);
  context.fillStyle = isChosen ? colours.paper : colours.ink;
  context.textAlign = 'left';
  context.textBaseline = 'middle';
  context.fillText(text, left + INSET_PX, top + PLATE_PX / 2 + 0.5);
  if (!isChosen) return;
  context.fillStyle = colours.ink;
  context.fillRect(places.gutterPx, row.topPx, BAR_PX, row.heightPx);
}
