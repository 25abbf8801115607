import type { CandidateOverview, HearingClass } from '@shared/contract/candidates.ts';
import { countsOf } from '@/composables/candidates/step-counts.ts';
import type { Palette } from '@/theme/palette.ts';

export interface StripScene {
  widthPx: number;
  heightPx: number;
  overview: CandidateOverview;
  classes: readonly HearingClass[];
  colours: Palette;
}

export function colourOfClass(name: HearingClass, colours: Palette): string {
  const byClass: Readonly<Record<HearingClass, string>> = {
    above: colours.fracture,
    across: colours.glowFill,
    below: colours.melt,
    unknown: colours.edge,
  };
  return byClass[name];
}

const leastWidthPx = 1;
/** One candidate among thousands in a step elsewhere still has to be seen. */
const leastHeightPx = 2;
const roomAbovePx = 4;

/** Candidates per step as columns, parted by class from the ground up. */
export function drawCandidateStrip(
  context: CanvasRenderingContext2D,
  { overview, classes, heightPx, widthPx, colours }: StripScene,
): void {
  const totals = countsOf(overview, classes);
  const most = Math.max(1, ...totals);
  const room = heightPx - roomAbovePx;
  const width = (widthPx * overview.samplesPerStep) / (overview.endSample - overview.startSample);
  for (const [step, total] of totals.entries()) {
    if (total === 0) continue;
    const columnPx = Math.max(leastHeightPx, (total / most) * room);
    let bottom = heightPx;
    for (const name of classes) {
      const part = ((overview.steps[name][step] ?? 0) / total) * columnPx;
      context.fillStyle = colourOfClass(name, colours);
      const left = step * width;
      const partWidth = Math.min(widthPx - left, Math.max(leastWidthPx, width));
      context.fillRect(left, bottom - part, partWidth, part);
      bottom -= part;
    }
  }
}
