import { formatFrequency, formatNumber, formatSeconds } from '@/composables/useFormat.ts';
import { readTypedNumber } from '@/components/app/typed-number.ts';
import { timeDecimals } from '@/composables/bench/time-axis.ts';

export const PLACE_UNITS = ['seconds', 'samples'] as const;
/** In what places are typed. */
export type PlaceUnit = (typeof PLACE_UNITS)[number];

export type Typed<Value> = { value: Value; fault: null } | { value: null; fault: string };

export interface PlaceLimits {
  least: number;
  most: number;
  sampleRateHz: number;
}

export function placeText(sample: number, unit: PlaceUnit, sampleRateHz: number): string {
  if (unit === 'samples') return String(sample);
  return (sample / sampleRateHz).toFixed(timeDecimals(sampleRateHz));
}

/** The sample that somebody typed, or a sentence that says what is wrong with it. */
export function readPlace(text: string, unit: PlaceUnit, limits: PlaceLimits): Typed<number> {
  const typed = readTypedNumber(text);
  if (typed === null || typed === undefined)
    return fault(
      unit === 'samples' ? 'Type a whole number of samples.' : 'Type a time in seconds, like 41.3248.',
    );
  if (unit === 'samples' && !Number.isInteger(typed)) return fault('Samples are whole numbers.');
  const sample = Math.round(unit === 'samples' ? typed : typed * limits.sampleRateHz);
  const words = (limit: number) => limitWords(limit, unit, limits.sampleRateHz);
  if (sample < limits.least) return fault(`At least ${words(limits.least)}.`);
  if (sample > limits.most) return fault(`At most ${words(limits.most)}.`);
  return { value: sample, fault: null };
}

function limitWords(sample: number, unit: PlaceUnit, sampleRateHz: number): string {
  if (unit === 'samples') return formatNumber(sample);
  return formatSeconds(sample / sampleRateHz, timeDecimals(sampleRateHz));
}

export interface BandLimits {
  mostHz: number;
  /** The other edge, where there is one. */
  lowHz: number | null;
  highHz: number | null;
}

/** An edge of a band typed in kilohertz; empty means that there is none. */
export function readBandEdge(text: string, { mostHz, lowHz, highHz }: BandLimits): Typed<number | null> {
  const typed = readTypedNumber(text);
  if (typed === undefined) return fault('Type a frequency in kHz, or nothing.');
  if (typed === null) return { value: null, fault: null } as Typed<number | null>;
  const hz = Math.round(typed * 1e6) / 1e3;
  if (hz < 0) return fault('A frequency is not below 0.');
  if (hz > mostHz) return fault(`At most ${formatFrequency(mostHz, 6)}, half the sample rate.`);
  if (lowHz !== null && hz <= lowHz) return fault(`Must lie above ${formatFrequency(lowHz, 6)}.`);
  if (highHz !== null && hz >= highHz) return fault(`Must lie below ${formatFrequency(highHz, 6)}.`);
  return { value: hz, fault: null };
}

function fault(words: string): { value: null; fault: string } {
  return { value: null, fault: words };
}
