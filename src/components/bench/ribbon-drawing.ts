import type { SampleSpan } from '@shared/domain/event-span.ts';
import type { SpanSet } from '@shared/domain/span-set.ts';
import type { Palette } from '@/theme/palette.ts';

export interface RibbonDrawing {
  widthPx: number;
  heightPx: number;
  /** From samples of the recording to the width. */
  toPx: (sample: number) => number;
  /** What the pass is of; `isWhole` where that is everything. */
  part: SpanSet;
  isWhole: boolean;
  seen: readonly SampleSpan[];
  heard: readonly SampleSpan[];
  colours: Palette;
}

/** A window of a long recording would be thinner than a line. */
const LEAST_PX = 3;
const HEARD_PX = 2;

/**
 * The part of the pass as a trough, what was seen as its filling, what was heard as a line under it: height and place tell
 * them apart, not the colour alone.
 */
export function drawRibbon(context: CanvasRenderingContext2D, drawing: RibbonDrawing): void {
  const { widthPx, heightPx, part, isWhole, colours } = drawing;
  context.clearRect(0, 0, widthPx, heightPx);
  const troughPx = heightPx - HEARD_PX - 1;
  const least = isWhole ? 1 : LEAST_PX;
  for (const { left, width } of boxes(part, drawing, least)) {
    context.fillStyle = colours.tint;
    context.fillRect(left, 0, width, troughPx);
    context.strokeStyle = colours.edge;
    context.lineWidth = 1;
    context.strokeRect(left + 0.5, 0.5, Math.max(1, width - 1), troughPx - 1);
  }
  context.fillStyle = colours.melt;
  for (const { left, width } of boxes(drawing.seen, drawing, 1))
    context.fillRect(left, 1, width, troughPx - 2);
  context.fillStyle = colours.ink;
  for (const { left, width } of boxes(drawing.heard, drawing, 1))
    context.fillRect(left, heightPx - HEARD_PX, width, HEARD_PX);
}

function boxes(
  spans: readonly SampleSpan[],
  { widthPx, toPx }: RibbonDrawing,
  leastPx: number,
): { left: number; width: number }[] {
  return spans.map(({ startSample, endSample }) => {
    const left = toPx(startSample);
    const width = toPx(endSample) - left;
    return { left: Math.min(left, widthPx - leastPx), width: Math.max(leastPx, width) };
  });
}
