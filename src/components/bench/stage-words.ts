import type { Candidate } from '@shared/contract/candidates.ts';
import type { EventClass } from '@shared/contract/schemes.ts';
import type { PictureLayout } from '@shared/contract/views.ts';
import { levelUnder } from '@/composables/bench/level-under.ts';
import type { LevelUnder } from '@/composables/bench/level-under.ts';
import type { BenchMark } from '@/composables/bench/mark.ts';
import { classGlyph, timeWords } from '@/composables/bench/mark-words.ts';
import { windowSamples } from '@/composables/bench/time-axis.ts';
import type { TimeWindow } from '@/composables/bench/time-axis.ts';
import type { Bench } from '@/composables/bench/useBench.ts';
import { frameSamplesAt, levelFor } from '@/composables/bench/tile-plan.ts';
import {
  formatCount,
  formatDecibels,
  formatDuration,
  formatFrequency,
  formatNumber,
} from '@/composables/useFormat.ts';
import type { Look } from '@/components/bench/look.ts';
import type { Fracture } from '@/components/bench/mark-drawing.ts';
import type { PointedPlace } from '@/components/bench/pointer-work.ts';
import { channelName } from '@/components/bench/row-name.ts';

export interface FractureSources {
  marks: readonly BenchMark[];
  candidates: readonly Candidate[];
  classes: readonly EventClass[];
  selectedKeys: ReadonlySet<string>;
  /** Of several, the one whose edges can be taken hold of. */
  leadKey: string | null;
  selectedCandidateId: string | null;
}

/** Marks and candidates as the picture draws them; a candidate that became a mark is not drawn twice. */
export function toFractures(sources: FractureSources): Fracture[] {
  const { marks, candidates, classes, selectedKeys, leadKey, selectedCandidateId } = sources;
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
      isLead: candidate.id === selectedCandidateId,
    }));
  const solid = marks.map((mark) => ({
    key: mark.key,
    startSample: mark.startSample,
    endSample: mark.endSample,
    lowHz: mark.lowHz,
    highHz: mark.highHz,
    glyph: classGlyph(mark.classKey, classes),
    kind: 'mark' as const,
    isSelected: selectedKeys.has(mark.key),
    isLead: mark.key === leadKey,
  }));
  return [...dotted, ...solid];
}

/**
 * What lies under the pointer, or else under the cursor of the keyboard:
 * "41.324 8 s, sample 7 934 362, 152 kHz, −71.5 dB, 26.5 dB over its quiet".
 */
export function readoutWords(bench: Bench, point: PointedPlace | null): string {
  const { layout, view, channels, tiles, quietBins, widthPx } = bench;
  // Levels are read again when tiles have come.
  void tiles.arrivals.value;
  const place = point ?? {
    sample: view.cursorSample.value,
    hz: view.cursorHz.value,
    channel: channels.channel.value,
  };
  const sample = Math.min(layout.frames - 1, Math.max(0, Math.floor(place.sample)));
  const words = [timeWords(sample, layout.sampleRateHz), `sample ${formatNumber(sample)}`];
  if (channels.isStacked.value) words.unshift(channelName(place.channel));
  if (place.hz === null) return words.join(', ');
  const samplesPerPixel = windowSamples(view.shown.value) / Math.max(1, widthPx.value);
  const sources = { pictures: layout.pictures, samplesPerPixel, find: tiles.find, quietBins };
  const level = levelUnder({ channel: place.channel, sample, hz: place.hz }, sources);
  return [...words, formatFrequency(place.hz), ...levelWords(level)].join(', ');
}

function levelWords(level: LevelUnder | null): string[] {
  if (!level) return [];
  const { levelDb, overQuietDb } = level;
  if (overQuietDb === null) return [formatDecibels(levelDb)];
  const side = overQuietDb < 0 ? 'under' : 'over';
  return [formatDecibels(levelDb), `${formatDecibels(Math.abs(overQuietDb))} ${side} its quiet`];
}

/** Top band first, each with what is said of it: "a above 20 kHz, b below". */
function ofBands(bench: Bench, say: (layout: PictureLayout, level: number) => string): string {
  const samplesPerPixel = windowSamples(bench.view.shown.value) / Math.max(1, bench.widthPx.value);
  const sorted = [...bench.layout.pictures].sort((a, b) => b.lowHz - a.lowHz);
  return sorted
    .map((picture) => {
      const place = picture.band === 'ultrasonic' ? 'above 20\u00A0kHz' : 'below';
      return `${say(picture, levelFor(picture, samplesPerPixel))} ${place}`;
    })
    .join(', ');
}

/** What the colours stand for: "−98 to −52 dB above 20 kHz, −80 to −34 dB below". */
export function scaleWords(bench: Bench, look: Look): string {
  // Until the first tile is here, nothing is known of the levels.
  if (bench.tiles.arrivals.value === 0) return '';
  const span = (lowDb: number) => `${formatNumber(lowDb)} to ${formatNumber(lowDb + look.rangeDb)}\u00A0dB`;
  if (look.isOverQuiet) return `${span(look.floorOverQuietDb)} over the quiet of each frequency`;
  return ofBands(bench, ({ band }, level) => span(bench.quietOf(band, level) + look.floorOverQuietDb));
}

/** From what the picture is made at this zoom: "frames of 167 µs above 20 kHz, 1.33 ms below". */
export function frameWords(bench: Bench): string {
  const { sampleRateHz } = bench.layout;
  const durations = ofBands(bench, (picture, level) =>
    formatDuration(frameSamplesAt(picture, level) / sampleRateHz),
  );
  return durations === '' ? '' : `Frames of ${durations}`;
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
