import type { Video } from '@shared/contract/videos.ts';
import {
  driftMs,
  frameUncertaintyS,
  soundLagMs,
  syncFromMarks,
  worstMissS,
} from '@shared/domain/film-clock.ts';
import { formatBytes, formatCount, formatDuration, formatNumber } from '@/composables/useFormat.ts';

const ms = (milliseconds: number) => formatDuration(milliseconds / 1000, 2);

/** "96 x 64, 10 pictures/s, 4 s, 7.9 kB" */
export function filmFacts({ widthPx, heightPx, framesPerS, durationS, sizeBytes }: Video): string {
  return [
    widthPx !== null && heightPx !== null ? `${widthPx} \u00D7 ${heightPx}` : '',
    framesPerS !== null ? `${formatNumber(framesPerS, { maximumFractionDigits: 2 })} pictures/s` : '',
    durationS !== null ? formatDuration(durationS) : '',
    formatBytes(sizeBytes),
  ]
    .filter(Boolean)
    .join(', ');
}

/** How well film and sound are in step, in sentences; the figures are those of the marks. */
export function stepWords(video: Video): string[] {
  if (video.runOffsetNs === null) return ['Its place in the run is not set: the film does not follow yet.'];
  const { syncMarks, framesPerS } = video;
  const clock = { runOffsetNs: video.runOffsetNs, clockPpm: video.clockPpm };
  const drift = syncFromMarks(syncMarks, framesPerS)?.drift ?? null;
  const closest = frameUncertaintyS(framesPerS);
  const missS = worstMissS(syncMarks, clock);
  return [
    syncMarks.length > 0 ? `In step by ${formatCount(syncMarks.length, 'mark')}.` : 'Its place was typed.',
    drift === null
      ? 'The drift of its clock is told by a second mark, far from the first.'
      : driftWords(drift),
    `A picture lasts ${formatDuration(2 * closest, 3)}: nothing is told closer than \u00B1${formatDuration(closest, 2)}.`,
    missS > 2 * closest ? `One of the marks is off by ${formatDuration(missS, 2)}: set them again.` : '',
  ].filter(Boolean);
}

interface Drift {
  measuredPpm: number;
  uncertaintyPpm: number;
  isApplied: boolean;
}

function driftWords({ measuredPpm, uncertaintyPpm, isApplied }: Drift): string {
  const ppm = `${formatNumber(Math.abs(measuredPpm), { maximumSignificantDigits: 3 })} ppm`;
  const within = `\u00B1${formatNumber(uncertaintyPpm, { maximumSignificantDigits: 2 })} ppm`;
  if (!isApplied) return `No drift that pictures could tell (within ${within}); none is taken into account.`;
  const way = measuredPpm > 0 ? 'fast' : 'slow';
  return `Its clock is ${ppm} ${way} (${within}): ${ms(driftMs(Math.abs(measuredPpm), 3600))} in an hour, taken into account.`;
}

/** For a microphone in air; sound in a solid is there at once beside it. */
export function lagWords(distanceM: number | null): string {
  if (distanceM === null) return `Sound in air comes ${ms(soundLagMs(1))} later for every metre.`;
  return `Over ${formatNumber(distanceM)}\u00A0m of air the sound comes ${ms(soundLagMs(distanceM))} later than the picture.`;
}
