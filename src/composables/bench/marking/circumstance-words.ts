import type { ListeningAids, MarkView } from '@shared/contract/mark-circumstances.ts';
import { windowSamples } from '@/composables/bench/time-axis.ts';
import { formatDuration, formatFrequency, formatNumber } from '@/composables/useFormat.ts';

/** "214 ms in 940 pixels, candidates shown" */
export function viewWords(view: MarkView, sampleRateHz: number): string {
  const width = formatDuration(windowSamples(view) / sampleRateHz);
  const shown = `${width} in ${formatNumber(view.widthPx)} pixels`;
  const candidates = view.areCandidatesShown ? 'candidates shown' : 'no candidates shown';
  return [shown, candidates, ...(view.isNormalised ? ['background taken off'] : [])].join(', ');
}

/** "slowed 20 times, hum gated by a quiet span" */
export function aidsWords({ mode, slow, carrierHz, gate }: ListeningAids): string {
  const heard = {
    'as-recorded': 'as recorded',
    slowed: `slowed ${formatNumber(slow)} times`,
    shifted: carrierHz === null ? 'shifted' : `shifted by ${formatFrequency(carrierHz)}`,
  }[mode];
  const gated = {
    off: [],
    machine: ['noise gated by the machine\u2019s profile'],
    span: ['noise gated by an own quiet span'],
  }[gate];
  return [heard, ...gated].join(', ');
}
