import type { Candidate } from '@shared/contract/candidates.ts';
import type { EventClass } from '@shared/contract/schemes.ts';
import type { BenchMark } from '@/composables/bench/mark.ts';
import { classGlyph, timeWords } from '@/composables/bench/mark-words.ts';
import { windowSamples } from '@/composables/bench/time-axis.ts';
import type { TimeWindow } from '@/composables/bench/time-axis.ts';
import type { Bench } from '@/composables/bench/useBench.ts';
import { levelFor } from '@/composables/bench/tile-plan.ts';
import { formatCount, formatFrequency, formatNumber } from '@/composables/useFormat.ts';
import type { Look } from '@/components/bench/look.ts';
import type { Fracture } from '@/components/bench/mark-drawing.ts';

export interface FractureSources {
  marks: readonly BenchMark[];
  candidates: readonly Candidate[];
  classes: readonly EventClass[];
  selectedKey: string | null;
  selectedCandidateId: string | null;
}

/** Marks and candidates as the picture draws them; a candidate that became a mark is not drawn twice. */
export function toFractures(sources: FractureSources): Fracture[] {
  const { marks, candidates, classes, selectedKey, selectedCandidateId } = sources;
  const taken = new Set(marks.map(({ candidateId }) => candidateId));
  const dotted = candidates
    .filter(({ id }) => !taken.has(id))
    .map((candidate) => ({
      key: candidate.id,
      startSample: candidate.onsetSample,
      endSample: candidate.endSample,
      lowHz: null,
      highHz: null,
      glyph: '',
      kind: 'candidate' as const,
      isSelected: candidate.id === selectedCandidateId,
    }));
  const solid = marks.map((mark) => ({
    key: mark.key,
    startSample: mark.startSample,
    endSample: mark.endSample,
    lowHz: mark.lowHz,
    highHz: mark.highHz,
    glyph: classGlyph(mark.classKey, classes),
    kind: 'mark' as const,
    isSelected: mark.key === selectedKey,
  }));
  return [...dotted, ...solid];
}

/** "41.3248 s, 152 kHz" */
export function pointWords(
  point: { sample: number; hz: number | null } | null,
  sampleRateHz: number,
): string {
  if (!point) return '';
  const time = timeWords(point.sample, sampleRateHz);
  return point.hz === null ? time : `${time}, ${formatFrequency(point.hz)}`;
}

/** What the colours stand for: "−98 to −52 dB above 20 kHz, −80 to −34 dB below". */
export function scaleWords({ layout, tiles, view, widthPx, quietOf }: Bench, look: Look): string {
  // Until the first tile is here, nothing is known of the levels.
  if (tiles.arrivals.value === 0) return '';
  const samplesPerPixel = windowSamples(view.shown.value) / Math.max(1, widthPx.value);
  const spans = layout.pictures.map((picture) => {
    const lowDb = quietOf(picture.band, levelFor(picture, samplesPerPixel)) + look.floorOverQuietDb;
    const place = picture.band === 'ultrasonic' ? 'above 20\u00A0kHz' : 'below';
    return {
      place,
      text: `${formatNumber(lowDb)} to ${formatNumber(lowDb + look.rangeDb)}\u00A0dB ${place}`,
    };
  });
  return spans
    .sort((a, b) => (a.place < b.place ? -1 : 1))
    .map(({ text }) => text)
    .join(', ');
}

/** What the picture shows, for those who cannot see it. */
export function pictureWords(
  window: TimeWindow,
  { sampleRateHz, marks }: { sampleRateHz: number; marks: readonly BenchMark[] },
): string {
  const count = marks.filter(
    ({ startSample, endSample }) => endSample > window.startSample && startSample < window.endSample,
  ).length;
  const [from, to] = [window.startSample, window.endSample].map((sample) => timeWords(sample, sampleRateHz));
  return `Spectrogram from ${from} to ${to}, ${formatCount(count, 'mark')}. The table of marks says the same in words.`;
}
