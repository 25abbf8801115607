import type { MarkView } from '@shared/contract/mark-circumstances.ts';
import type { MarkFields } from '@/composables/bench/mark.ts';
import { timeDecimals, windowSamples } from '@/composables/bench/time-axis.ts';
import { formatDuration, formatSeconds } from '@/composables/useFormat.ts';

/** A person sees no finer than a pixel, and no mark stands between two samples. */
export function zoomUncertainty(view: Pick<MarkView, 'startSample' | 'endSample' | 'widthPx'>): number {
  return Math.max(0.5, windowSamples(view) / Math.max(1, view.widthPx) / 2);
}

export type UncertaintySource = 'picker' | 'zoom' | 'detector';

type Onset = Pick<MarkFields, 'startSample' | 'uncertaintySamples' | 'rawStartSample' | 'origin' | 'view'>;

/** Who says how far off the start may be; follows from what is stored of the mark. */
export function uncertaintySource(mark: Onset): UncertaintySource | null {
  if (mark.uncertaintySamples === null) return null;
  if (mark.rawStartSample !== null) return 'picker';
  const byZoom = mark.view && zoomUncertainty(mark.view);
  const isByZoom = byZoom !== null && Math.abs(byZoom - mark.uncertaintySamples) < 1e-6 * byZoom;
  return mark.origin === 'candidate' && !isByZoom ? 'detector' : 'zoom';
}

const SOURCE_WORDS: Readonly<Record<UncertaintySource, string>> = {
  picker: 'picker',
  zoom: 'by the zoom it was set at',
  detector: 'by the detector',
};

/**
 * Digits after the point of a time in seconds that its uncertainty leaves meaning to: the last one is the uncertainty's
 * first digit, or its second where the first is a 1.
 */
export function decimalsFor(uncertaintyS: number, sampleRateHz: number): number {
  if (!(uncertaintyS > 0)) return timeDecimals(sampleRateHz);
  const exponent = Math.floor(Math.log10(uncertaintyS));
  const isLow = uncertaintyS / 10 ** exponent < 1.95;
  return Math.min(timeDecimals(sampleRateHz), Math.max(0, (isLow ? 1 : 0) - exponent));
}

function significantDigits(uncertaintyS: number): number {
  return uncertaintyS / 10 ** Math.floor(Math.log10(uncertaintyS)) < 1.95 ? 2 : 1;
}

/** "±20 µs" */
export function uncertaintyFigure(mark: Onset, sampleRateHz: number): string {
  if (mark.uncertaintySamples === null) return '';
  const seconds = mark.uncertaintySamples / sampleRateHz;
  return `\u00B1${formatDuration(seconds, significantDigits(seconds))}`;
}

/** "41.324 80 s" */
export function onsetFigure(mark: Onset, sampleRateHz: number): string {
  const seconds = (mark.uncertaintySamples ?? 0) / sampleRateHz;
  return formatSeconds(mark.startSample / sampleRateHz, decimalsFor(seconds, sampleRateHz));
}

/** "41.324 80 s ±20 µs, picker" */
export function onsetWords(mark: Onset, sampleRateHz: number): string {
  const source = uncertaintySource(mark);
  if (source === null) return onsetFigure(mark, sampleRateHz);
  return `${onsetFigure(mark, sampleRateHz)} ${uncertaintyFigure(mark, sampleRateHz)}, ${SOURCE_WORDS[source]}`;
}
