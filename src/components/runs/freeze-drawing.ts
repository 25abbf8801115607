import type { RunPiece, RunSpan } from '@shared/domain/run-time.ts';
import { pixelAtRunTime } from '@/composables/runs/run-axis.ts';
import type { StripTrace } from '@/composables/runs/strip-trace.ts';
import { valueRange } from '@/composables/runs/strip-trace.ts';
import type { Palette } from '@/theme/palette.ts';

export interface FreezeScene {
  widthPx: number;
  heightPx: number;
  span: RunSpan;
  /** In equal columns of the width. */
  levels: readonly (number | null)[];
  rates: readonly (number | null)[];
  traces: readonly StripTrace[];
  /** Where something was recorded; what lies between is hatched. */
  pieces: readonly RunPiece[];
  /** The part that the picture shows. */
  window: RunSpan | null;
  /** Where the next phase would start. */
  draftNs: number | null;
  playheadNs: number | null;
  colours: Palette;
}

const LEAST_WINDOW_PX = 3;
/** Of the height, for the highest rate: the line of the temperature keeps room above. */
const RATE_SHARE = 0.74;
const LEVEL_SHARE = 0.5;

/** The run at a glance: level and rate of events as areas, temperature as a line, the part that is shown. */
export function drawFreeze(context: CanvasRenderingContext2D, scene: FreezeScene): void {
  drawGaps(context, scene);
  drawLevels(context, scene);
  drawRates(context, scene);
  for (const trace of scene.traces) drawTrace(context, scene, trace);
  if (scene.window) drawWindow(context, scene, scene.window);
  drawPlace(context, scene, scene.draftNs, scene.colours.melt);
  drawPlace(context, scene, scene.playheadNs, scene.colours.glowFill);
}

const toX = (ns: number, { span, widthPx }: FreezeScene) => pixelAtRunTime(ns, span, widthPx);

/** Stretches without a recording, in thin slanted lines. */
function drawGaps(context: CanvasRenderingContext2D, scene: FreezeScene): void {
  const { widthPx, heightPx, colours } = scene;
  if (scene.pieces.length === 0) return;
  context.save();
  context.beginPath();
  let fromPx = 0;
  for (const piece of [...scene.pieces].sort((a, b) => a.startNs - b.startNs)) {
    const left = toX(piece.startNs, scene);
    if (left - fromPx > 1) context.rect(fromPx, 0, left - fromPx, heightPx);
    fromPx = Math.max(fromPx, toX(piece.endNs, scene));
  }
  if (widthPx - fromPx > 1) context.rect(fromPx, 0, widthPx - fromPx, heightPx);
  context.clip();
  context.strokeStyle = colours.edge;
  context.globalAlpha = 0.45;
  context.lineWidth = 1;
  context.beginPath();
  for (let x = -heightPx; x < widthPx; x += 7) {
    context.moveTo(x, heightPx);
    context.lineTo(x + heightPx, 0);
  }
  context.stroke();
  context.restore();
}

function drawLevels(context: CanvasRenderingContext2D, scene: FreezeScene): void {
  const known = scene.levels.filter((level) => level !== null);
  if (known.length === 0) return;
  const low = Math.min(...known) - 3;
  const high = Math.max(Math.max(...known), low + 9);
  const share = scene.rates.some((rate) => rate !== null) ? LEVEL_SHARE : 0.9;
  context.fillStyle = scene.colours.melt;
  context.globalAlpha = 0.32;
  drawColumns(context, scene, scene.levels, (level) => ((level - low) / (high - low)) * share);
  context.globalAlpha = 1;
}

function drawRates(context: CanvasRenderingContext2D, scene: FreezeScene): void {
  const most = Math.max(0, ...scene.rates.map((rate) => rate ?? 0));
  if (most === 0) return;
  const toShare = (rate: number) => (rate / most) * RATE_SHARE;
  context.fillStyle = scene.colours.fracture;
  context.globalAlpha = 0.42;
  drawColumns(context, scene, scene.rates, toShare);
  context.globalAlpha = 1;
  // The upper edge in full colour, so that a single event stays visible at the foot.
  const { widthPx, heightPx, rates } = scene;
  const step = widthPx / rates.length;
  rates.forEach((rate, column) => {
    if (!rate || toShare(rate) < 0.01) return;
    const top = heightPx - Math.max(1.5, toShare(rate) * heightPx);
    context.fillRect(column * step, top, Math.max(1, step), 1.5);
  });
}

function drawColumns(
  context: CanvasRenderingContext2D,
  { widthPx, heightPx }: FreezeScene,
  values: readonly (number | null)[],
  toShare: (value: number) => number,
): void {
  const step = widthPx / values.length;
  context.beginPath();
  values.forEach((value, column) => {
    if (value === null) return;
    const height = toShare(value) * heightPx;
    context.rect(column * step, heightPx - height, step, height);
  });
  context.fill();
}

function drawTrace(context: CanvasRenderingContext2D, scene: FreezeScene, trace: StripTrace): void {
  const range = valueRange(scene.traces);
  if (range === null) return;
  const { heightPx, colours } = scene;
  const toY = (value: number) => 5 + (1 - (value - range.low) / (range.high - range.low)) * (heightPx - 10);
  context.beginPath();
  trace.points.forEach(({ ns, value }, index) => {
    if (index === 0) context.moveTo(toX(ns, scene), toY(value));
    else context.lineTo(toX(ns, scene), toY(value));
  });
  context.strokeStyle = colours.paper;
  context.lineWidth = 3.5;
  context.lineJoin = 'round';
  context.stroke();
  context.strokeStyle = colours.ink;
  context.lineWidth = 1.5;
  context.stroke();
  for (const { startNs, endNs, value } of trace.recalescences) {
    context.beginPath();
    context.arc(toX((startNs + endNs) / 2, scene), toY(value), 4, 0, 2 * Math.PI);
    context.fillStyle = colours.glowFill;
    context.fill();
    context.strokeStyle = colours.paper;
    context.lineWidth = 1;
    context.stroke();
  }
}

function drawWindow(context: CanvasRenderingContext2D, scene: FreezeScene, window: RunSpan): void {
  const { heightPx, widthPx, colours } = scene;
  const left = toX(window.startNs, scene);
  const right = toX(window.endNs, scene);
  if (right - left >= widthPx - 1) return;
  const spare = Math.max(0, LEAST_WINDOW_PX - (right - left)) / 2;
  context.fillStyle = colours.paper;
  context.globalAlpha = 0.5;
  context.fillRect(0, 0, Math.max(0, left - spare), heightPx);
  context.fillRect(right + spare, 0, Math.max(0, widthPx - right - spare), heightPx);
  context.globalAlpha = 1;
  context.strokeStyle = colours.ink;
  context.lineWidth = 1.5;
  context.strokeRect(left - spare + 0.75, 0.75, right - left + 2 * spare - 1.5, heightPx - 1.5);
}

function drawPlace(
  context: CanvasRenderingContext2D,
  scene: FreezeScene,
  ns: number | null,
  colour: string,
): void {
  if (ns === null) return;
  context.fillStyle = colour;
  context.fillRect(toX(ns, scene) - 1, 0, 2, scene.heightPx);
}
