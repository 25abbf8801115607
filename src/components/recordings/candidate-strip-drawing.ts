import type { CandidateOverview, HearingClass } from '@shared/contract/candidates.ts';
import { countsOf } from '@/composables/candidates/step-counts.ts';
import type { Palette } from '@/theme/palette.ts';

export interface StripScene {
  widthPx: number;
  heightPx: number;
  overview: CandidateOverview;
  classes: readonly HearingClass[];
  /** Part of the time in which the rows in sight lie. */
  shown: { startSample: number; endSample: number } | null;
  step: number;
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

/** Candidates per step as columns, parted by class from the ground up; what the table shows is framed. */
export function drawCandidateStrip(context: CanvasRenderingContext2D, scene: StripScene): void {
  drawColumns(context, scene);
  drawShown(context, scene);
  drawPlace(context, scene);
}

function stepWidth({ overview, widthPx }: StripScene): number {
  return (widthPx * overview.samplesPerStep) / (overview.endSample - overview.startSample);
}

function drawColumns(context: CanvasRenderingContext2D, scene: StripScene): void {
  const { overview, classes, heightPx, widthPx, colours } = scene;
  const totals = countsOf(overview, classes);
  const most = Math.max(1, ...totals);
  const room = heightPx - roomAbovePx;
  const width = stepWidth(scene);
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

function toX(sample: number, { overview, widthPx }: StripScene): number {
  const { startSample, endSample } = overview;
  const share = (sample - startSample) / (endSample - startSample);
  return Math.max(0, Math.min(1, share)) * widthPx;
}

const leastFramePx = 3;

function drawShown(context: CanvasRenderingContext2D, scene: StripScene): void {
  const { shown, heightPx, widthPx, colours } = scene;
  if (!shown) return;
  const left = Math.min(widthPx - leastFramePx, toX(shown.startSample, scene));
  const width = Math.max(leastFramePx, toX(shown.endSample, scene) - left);
  context.strokeStyle = colours.ink;
  context.lineWidth = 1.5;
  context.strokeRect(left + 0.75, 0.75, Math.max(1, width - 1.5), heightPx - 1.5);
}

/** A notch where the keys stand. */
function drawPlace(context: CanvasRenderingContext2D, scene: StripScene): void {
  const x = (scene.step + 0.5) * stepWidth(scene);
  context.fillStyle = scene.colours.ink;
  context.beginPath();
  context.moveTo(x - 4, 0);
  context.lineTo(x + 4, 0);
  context.lineTo(x, 6);
  context.fill();
}
