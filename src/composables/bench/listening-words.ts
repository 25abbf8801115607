import type { ListeningAids } from '@shared/contract/mark-circumstances.ts';
import { HEARING_LINE_HZ } from '@/composables/bench/hearing-line.ts';
import type { TimeWindow } from '@/composables/bench/time-axis.ts';
import { windowSamples } from '@/composables/bench/time-axis.ts';
import { formatDuration, formatFrequency, formatNumber } from '@/composables/useFormat.ts';

/** Says what is heard: "20 times slower: 150 kHz is heard as 7.5 kHz". */
export function heardWords(
  aids: ListeningAids,
  sampleRateHz: number,
  peakFrequencyHz: number | null,
): string {
  if (aids.mode === 'shifted') return shiftedWords(aids, peakFrequencyHz);
  if (aids.mode === 'as-recorded') {
    return sampleRateHz / 2 > HEARING_LINE_HZ ? 'As recorded: heard up to 20 kHz' : 'As recorded';
  }
  const exampleHz = peakFrequencyHz ?? exampleFrequency(aids.slow, sampleRateHz);
  return `${aids.slow} times slower: ${asHeard(exampleHz, exampleHz / aids.slow)}`;
}

function shiftedWords({ carrierHz, slow }: ListeningAids, peakFrequencyHz: number | null): string {
  const downHz = carrierHz ?? 0;
  const isPeakHeard =
    peakFrequencyHz !== null && peakFrequencyHz > downHz && peakFrequencyHz - downHz < 15_000 * slow;
  const exampleHz = isPeakHeard ? peakFrequencyHz : downHz + 2000 * slow;
  const slower = slow === 1 ? '' : `, ${slow} times slower`;
  return `Shifted${slower}: ${asHeard(exampleHz, (exampleHz - downHz) / slow)}`;
}

function asHeard(hz: number, heardHz: number): string {
  return `${frequency(hz)} is heard as ${frequency(heardHz)}`;
}

function frequency(hz: number): string {
  return formatFrequency(hz, 4);
}

/** A round frequency that the recording holds and that is heard well when slowed. */
function exampleFrequency(slow: number, sampleRateHz: number): number {
  const rounds = [400_000, 200_000, 150_000, 100_000, 50_000, 20_000, 10_000, 5000];
  return rounds.find((hz) => hz < sampleRateHz / 2.2 && hz / slow <= 15_000) ?? 1000;
}

/** What goes with it, in a second sentence. */
export function besideWords(aids: ListeningAids): string {
  const shift = aids.mode === 'shifted' ? 'Distances in hertz stay, ratios do not.' : '';
  const gate = aids.gate === 'off' ? '' : 'Hum is 20\u00A0dB down, and what is as faint with it.';
  return [shift, gate].filter((words) => words !== '').join(' ');
}

/** "20 ms lasts 0.4 s" */
export function lastsWords(samples: number, sampleRateHz: number, slow: number): string {
  const seconds = samples / sampleRateHz;
  return `${formatDuration(seconds, 2)} lasts ${formatDuration(seconds * slow, 2)}`;
}

/** "0.0-2.1 s", in finer steps where the span is short. */
export function spanWords(span: TimeWindow, sampleRateHz: number): string {
  const lengthS = windowSamples(span) / sampleRateHz;
  const decimals = Math.min(6, Math.max(1, Math.ceil(1 - Math.log10(Math.max(1e-6, lengthS)))));
  const options = { minimumFractionDigits: decimals, maximumFractionDigits: decimals };
  const [start, end] = [span.startSample, span.endSample].map((at) =>
    formatNumber(at / sampleRateHz, options),
  );
  return `${start}\u2013${end}\u00A0s`;
}
