import type { Course } from '@shared/contract/measurement.ts';
import { pixelAtSample } from '@/composables/bench/time-axis.ts';
import type { TimeWindow } from '@/composables/bench/time-axis.ts';
import type { Palette } from '@/theme/palette.ts';

export interface StripScene {
  widthPx: number;
  heightPx: number;
  course: Course | null;
  frames: number;
  window: TimeWindow;
  playheadSample: number | null;
  colours: Palette;
}

const LEAST_WINDOW_PX = 3;

/** The whole recording: level as an area, candidates per step as columns (where they may be seen), the window. */
export function drawStrip(context: CanvasRenderingContext2D, scene: StripScene): void {
  if (scene.course) {
    drawLevel(context, scene, scene.course);
    drawCandidates(context, scene, scene.course);
  }
  drawWindow(context, scene);
  drawPlace(context, scene);
}

function toX(sample: number, { frames, widthPx }: StripScene): number {
  return pixelAtSample(sample, { startSample: 0, endSample: frames }, widthPx);
}

function rangeOf(levels: readonly (number | null)[]): { low: number; high: number } {
  const known = levels.filter((level) => level !== null);
  const low = Math.min(...known);
  const high = Math.max(...known);
  return known.length === 0 ? { low: -100, high: 0 } : { low: low - 3, high: Math.max(high, low + 6) };
}

function drawLevel(context: CanvasRenderingContext2D, scene: StripScene, course: Course): void {
  const { heightPx, colours } = scene;
  const { low, high } = rangeOf(course.levelDb);
  context.fillStyle = colours.melt;
  context.globalAlpha = 0.55;
  course.levelDb.forEach((level, step) => {
    if (level === null) return;
    const height = ((level - low) / (high - low)) * (heightPx - 4);
    const left = toX(step * course.samplesPerStep, scene);
    const right = toX(Math.min(scene.frames, (step + 1) * course.samplesPerStep), scene);
    context.fillRect(left, heightPx - height, Math.max(0.75, right - left), height);
  });
  context.globalAlpha = 1;
}

function drawCandidates(context: CanvasRenderingContext2D, scene: StripScene, course: Course): void {
  const most = Math.max(...course.candidates, 1);
  context.fillStyle = scene.colours.fracture;
  course.candidates.forEach((count, step) => {
    if (count === 0) return;
    const height = 3 + (count / most) * (scene.heightPx * 0.45);
    const left = toX(step * course.samplesPerStep, scene);
    const right = toX((step + 1) * course.samplesPerStep, scene);
    context.fillRect(left, 0, Math.max(1.5, right - left), height);
  });
}

function drawWindow(context: CanvasRenderingContext2D, scene: StripScene): void {
  const { window, heightPx, widthPx, colours } = scene;
  const left = toX(window.startSample, scene);
  const right = toX(window.endSample, scene);
  const spare = Math.max(0, LEAST_WINDOW_PX - (right - left)) / 2;
  context.fillStyle = colours.paper;
  context.globalAlpha = 0.55;
  context.fillRect(0, 0, Math.max(0, left - spare), heightPx);
  context.fillRect(right + spare, 0, Math.max(0, widthPx - right - spare), heightPx);
  context.globalAlpha = 1;
  context.strokeStyle = colours.ink;
  context.lineWidth = 1.5;
  context.strokeRect(left - spare + 0.75, 0.75, right - left + 2 * spare - 1.5, heightPx - 1.5);
}

function drawPlace(context: CanvasRenderingContext2D, scene: StripScene): void {
  if (scene.playheadSample === null) return;
  context.fillStyle = scene.colours.glowFill;
  context.fillRect(toX(scene.playheadSample, scene) - 1, 0, 2, scene.heightPx);
}
