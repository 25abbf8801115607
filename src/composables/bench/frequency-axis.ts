import { HEARING_LINE_HZ } from '@/composables/bench/hearing-line.ts';
import { multiplesWithin, niceStep } from '@/composables/axis-ticks.ts';
import type { AxisTick } from '@/composables/bench/time-axis.ts';
import type { PictureBand } from '@shared/contract/views.ts';

/** One band of the picture on the screen; frequency is linear within it, highest at the top. */
export interface BandPlace {
  band: PictureBand;
  lowHz: number;
  highHz: number;
  topPx: number;
  heightPx: number;
}

export function yOfFrequency(hz: number, place: BandPlace): number {
  const share = (hz - place.lowHz) / (place.highHz - place.lowHz);
  return place.topPx + (1 - Math.min(1, Math.max(0, share))) * place.heightPx;
}

/** The height of a frequency in whichever band shows it, those above the other one first. */
export function yAcrossBands(hz: number, places: readonly BandPlace[]): number {
  const place = places.find(({ lowHz }) => hz >= lowHz) ?? places.at(-1);
  return place ? yOfFrequency(hz, place) : 0;
}

/** The frequency at a height of the picture; between the bands it is the hearing line. */
export function frequencyAtY(y: number, places: readonly BandPlace[]): number {
  const place = places.find(({ topPx, heightPx }) => y >= topPx && y <= topPx + heightPx);
  if (place) return place.highHz - ((y - place.topPx) / place.heightPx) * (place.highHz - place.lowHz);
  const highest = places[0];
  const lowest = places.at(-1);
  if (highest && y < highest.topPx) return highest.highHz;
  if (lowest && y > lowest.topPx + lowest.heightPx) return lowest.lowHz;
  return HEARING_LINE_HZ;
}

const DISTANCE_PX = 34;

/** Labels in kilohertz; the top one carries the unit. The ends of a band are left to the hearing line and the edge. */
export function frequencyTicks(place: BandPlace): AxisTick[] {
  const spanHz = place.highHz - place.lowHz;
  const step = niceStep((spanHz * DISTANCE_PX) / Math.max(DISTANCE_PX, place.heightPx));
  const clearHz = (spanHz * 9) / Math.max(1, place.heightPx);
  const values = multiplesWithin(place.lowHz, place.highHz, step).filter(
    (hz) => hz - place.lowHz > clearHz && place.highHz - hz > clearHz,
  );
  return values.map((value, index) => ({
    value,
    label: index === values.length - 1 ? `${value / 1000}\u00A0kHz` : String(value / 1000),
  }));
}
