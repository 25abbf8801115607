import { frequencyAtY } from '@/composables/bench/frequency-axis.ts';
import type { DraftSpan } from '@/composables/bench/new-mark.ts';
import { rowAt } from '@/composables/bench/stage-places.ts';
import type { StagePlaces } from '@/composables/bench/stage-places.ts';
import { sampleAtPixel } from '@/composables/bench/time-axis.ts';
import type { TimeWindow } from '@/composables/bench/time-axis.ts';
import { xOf } from '@/components/bench/mark-drawing.ts';
import type { Fracture } from '@/components/bench/mark-drawing.ts';

export interface StageView {
  places: StagePlaces;
  window: TimeWindow;
}

export interface StagePoint {
  x: number;
  y: number;
}

/** Half of a hit zone of 24 px around the edges of the selected mark. */
const EDGE_REACH_PX = 12;
const PICK_REACH_PX = 8;
/** A shorter movement is a click. */
export const DRAG_FROM_PX = 4;

export function sampleAt(x: number, { places, window }: StageView): number {
  return sampleAtPixel(x - places.gutterPx, window, places.plotWidthPx);
}

/** A place under the pointer, of the channel whose picture is there. */
export interface PointedPlace {
  sample: number;
  hz: number | null;
  channel: number;
}

export function pointedAt(point: StagePoint, view: StageView): PointedPlace {
  const row = rowAt(point.y, view.places);
  return {
    sample: sampleAt(point.x, view),
    hz: row && frequencyAtY(point.y, [row.ultrasonic, row.audible]),
    channel: row?.channel ?? view.places.channel,
  };
}

/** In the chosen channel; `null` outside its bands: the waveform says nothing about frequency. */
export function frequencyAt(y: number, { places }: StageView): number | null {
  const isAbove = y < (places.rows.length > 1 ? places.ultrasonic.topPx : places.glyphHeightPx);
  if (isAbove || y > places.audible.topPx + places.audible.heightPx) return null;
  return frequencyAtY(y, [places.ultrasonic, places.audible]);
}

export type Edge = 'start' | 'end';

/** The edge of the selected mark under the pointer; of two that are as near, the end where the pointer is beyond. */
export function edgeAt(point: StagePoint, selected: Fracture | undefined, view: StageView): Edge | null {
  if (!selected || selected.kind !== 'mark') return null;
  const startX = xOf(selected.startSample, view);
  const endX = xOf(selected.endSample, view);
  const toStart = Math.abs(point.x - startX);
  const toEnd = Math.abs(point.x - endX);
  if (Math.min(toStart, toEnd) > EDGE_REACH_PX) return null;
  if (endX - startX < 2 * EDGE_REACH_PX) return point.x < (startX + endX) / 2 ? 'start' : 'end';
  return toStart <= toEnd ? 'start' : 'end';
}

/** The nearest fracture under the pointer, marks before candidates. */
export function fractureAt(
  point: StagePoint,
  fractures: readonly Fracture[],
  view: StageView,
): Fracture | null {
  const near = fractures
    .map((fracture) => ({ fracture, distance: Math.abs(point.x - xOf(fracture.startSample, view)) }))
    .filter(({ distance }) => distance <= PICK_REACH_PX)
    .sort((a, b) => rank(a.fracture) - rank(b.fracture) || a.distance - b.distance);
  return near[0]?.fracture ?? null;
}

function rank(fracture: Fracture): number {
  return fracture.kind === 'mark' ? 0 : 1;
}

/** The span between two points; drawn in the waveform, or flat, it takes all frequencies. */
export function draftBetween(from: StagePoint, to: StagePoint, view: StageView): DraftSpan {
  const samples = [sampleAt(from.x, view), sampleAt(to.x, view)];
  const startSample = Math.floor(Math.min(...samples));
  const endSample = Math.max(startSample + 1, Math.ceil(Math.max(...samples)));
  const low = frequencyAt(Math.max(from.y, to.y), view);
  const high = frequencyAt(Math.min(from.y, to.y), view);
  const isFlat = Math.abs(from.y - to.y) < 12;
  if (isFlat || low === null || high === null) return { startSample, endSample, lowHz: null, highHz: null };
  return { startSample, endSample, lowHz: roundHz(low), highHz: roundHz(high) };
}

function roundHz(hz: number): number {
  return Math.max(0, Math.round(hz / 10) * 10);
}
