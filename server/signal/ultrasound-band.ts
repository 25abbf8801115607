import { frequencyText } from '../../shared/audio/unit-text.ts';
import { edgeText } from './bandwidth.ts';
import { HEARING_LINE_HZ } from './hearing-line.ts';

/** What limits the view of a recording above 20 kHz. */
export interface BandLimits {
  readonly sampleRateHz: number;
  /** Edges of the sensor's band; `null` where nobody stated them. */
  readonly sensorLowHz: number | null;
  readonly sensorHighHz: number | null;
  /** Where the noise floor itself falls away; `null` without such an edge. */
  readonly floorEdgeHz: number | null;
}

export type ObservableBand =
  | { readonly observable: true; readonly lowHz: number; readonly highHz: number }
  | { readonly observable: false; readonly reason: string };

/** Share of the rate up to which a recorder's own filter lets pass. */
export const USABLE_SHARE_OF_RATE = 0.45;
const LEAST_RATIO = 2 ** (1 / 3);

/**
 * The band above 20 kHz in which all of these overlap: the sensor's band, 0.45 of the rate, and the floor up to its edge.
 * Content is no criterion: a quiet recording can observe. Under a third of an octave nothing is said.
 */
export function observableBand(limits: BandLimits): ObservableBand {
  const { sensorLowHz } = limits;
  const upper = upperLimit(limits);
  const lowHz = Math.max(HEARING_LINE_HZ, sensorLowHz ?? 0);
  if (upper.hz >= lowHz * LEAST_RATIO * (1 - 1e-9)) return { observable: true, lowHz, highHz: upper.hz };
  const reason =
    lowHz > HEARING_LINE_HZ && upper.hz >= HEARING_LINE_HZ * LEAST_RATIO
      ? `The sensor's band begins at ${frequencyText(lowHz)}, and ${upper.cause}: less than a third of an octave is left to look at.`
      : `${capital(upper.cause)}: above 20 kHz less than a third of an octave is left to look at.`;
  return { observable: false, reason };
}

/**
 * Whether enough is seen below the hearing line to say where a burst lies to it: a third of an octave, as above it.
 * @param lowHz where the sensor's band begins; `null` where nobody stated it.
 */
export function seesBelowHearingLine(lowHz: number | null): boolean {
  return (lowHz ?? 0) <= (HEARING_LINE_HZ / LEAST_RATIO) * (1 + 1e-9);
}

function upperLimit({ sampleRateHz, sensorHighHz, floorEdgeHz }: BandLimits): { hz: number; cause: string } {
  const byRate = USABLE_SHARE_OF_RATE * sampleRateHz;
  const limits = [
    {
      hz: byRate,
      cause: `a sample rate of ${frequencyText(sampleRateHz)} shows frequencies up to ${frequencyText(byRate)}`,
    },
  ];
  if (sensorHighHz !== null) {
    limits.push({ hz: sensorHighHz, cause: `the sensor's band ends at ${frequencyText(sensorHighHz)}` });
  }
  if (floorEdgeHz !== null) {
    const edge = edgeText(floorEdgeHz);
    limits.push({
      hz: floorEdgeHz,
      cause: `the noise floor itself ends at ${edge}, as behind a filter or a codec`,
    });
  }
  return limits.reduce((least, limit) => (limit.hz < least.hz ? limit : least));
}

function capital(text: string): string {
  return text.charAt(0).toUpperCase() + text.slice(1);
}
