import type { AudioFormat } from '../../shared/contract/measurement.ts';
import { frequencyText } from '../../shared/audio/unit-text.ts';

/** What is known of how a recording was made; `null` where nobody said. */
export interface MeasureContext {
  sensorLowHz: number | null;
  sensorHighHz: number | null;
  /** Volts at the recorder's input that reach full scale. */
  fullScaleV: number | null;
  preampGainDb: number | null;
  /** 1 for a recording as it was; k for one stored k times slower. */
  timeExpansion: number;
}

const MAXIMUM_RATE_HZ = 20_000_000;

/**
 * The format with the true sample rate, k times the rate that the file states, and a warning that says so.
 * @throws RangeError when the expansion is not above 0 or leads past 20 MHz.
 */
export function trueFormat(format: AudioFormat, timeExpansion: number): AudioFormat {
  if (timeExpansion === 1) return format;
  const sampleRateHz = Math.round(format.sampleRateHz * timeExpansion);
  if (!(timeExpansion > 0) || sampleRateHz < 1 || sampleRateHz > MAXIMUM_RATE_HZ) {
    throw new RangeError(`timeExpansion: ${timeExpansion} gives a rate of ${sampleRateHz} Hz`);
  }
  const warning = `The recording is declared time-expanded ${timeExpansion} times: its true sample rate is ${frequencyText(sampleRateHz)}, not the ${frequencyText(format.sampleRateHz)} that the file states. Every frequency and time here is the true one.`;
  return { ...format, sampleRateHz, warnings: [...format.warnings, warning] };
}
