import type { CandidateOverview } from '@shared/contract/candidates.ts';
import { classesShown, countsOf } from '@/composables/candidates/step-counts.ts';
import { xOf } from '@/components/bench/mark-drawing.ts';
import type { StagePen } from '@/components/bench/mark-drawing.ts';
import { fontText } from '@/theme/tokens.ts';

const ROOM_ABOVE_PX = 3;
const LEAST_PX = 1.5;
const LABEL_FONT = `11px ${fontText}`;
const LABEL_GAP_PX = 8;

/** Candidates that would hide each other: how many there are in each step, in the lane of glyphs, where no picture lies under it. */
export function drawDensity(pen: StagePen, density: CandidateOverview): void {
  const { context, places, colours } = pen;
  const counts = countsOf(density, classesShown(null));
  const most = Math.max(1, ...counts);
  context.save();
  context.font = LABEL_FONT;
  context.textAlign = 'right';
  context.textBaseline = 'middle';
  context.fillStyle = colours.inkQuiet;
  context.fillText('candidates', places.gutterPx - LABEL_GAP_PX, places.glyphHeightPx / 2);
  context.beginPath();
  context.rect(places.gutterPx, 0, places.plotWidthPx, places.glyphHeightPx);
  context.clip();
  context.globalAlpha = 0.6;
  for (const [step, count] of counts.entries()) {
    if (count === 0) continue;
    const start = density.startSample + step * density.samplesPerStep;
    const left = xOf(start, pen);
    const right = xOf(start + density.samplesPerStep, pen);
    const height = Math.max(LEAST_PX, (count / most) * (places.glyphHeightPx - ROOM_ABOVE_PX));
    context.fillRect(left, places.glyphHeightPx - height, Math.max(LEAST_PX, right - left), height);
  }
  context.restore();
}
