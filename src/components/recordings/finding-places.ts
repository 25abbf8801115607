import type { Place, QualityFinding } from '@shared/contract/measurement.ts';
import type { Recording } from '@shared/contract/recordings.ts';
import { formatClock, formatSeconds } from '@/composables/useFormat.ts';

type Facts = Pick<Recording, 'id' | 'frames' | 'sampleRateHz' | 'channels'>;

interface PlaceLink {
  name: string;
  to: { path: string; query: { from: string; to: string } };
}

/** Some time around a place, so that it is seen in what it cuts into. */
const leastMarginS = 0.05;
const marginInDurations = 1;

const minuteS = 60;
const decimals = 2;

function timeText(seconds: number): string {
  return seconds < minuteS ? formatSeconds(seconds, decimals) : formatClock(seconds);
}

/** A finding about the whole recording has no place of its own. */
function placesWithin(finding: QualityFinding, { frames }: Pick<Facts, 'frames'>): Place[] {
  return finding.places.filter(({ startSample, endSample }) => startSample > 0 || endSample < frames);
}

/** Where a finding lies, each a way to the bench; "1:05.2, channel 3" where there is more than one channel. */
export function placeLinks(finding: QualityFinding, recording: Facts): PlaceLink[] {
  const { id, frames, sampleRateHz, channels } = recording;
  const names = new Map<string, number>();
  return placesWithin(finding, recording).map(({ channel, startSample, endSample }) => {
    const margin = Math.ceil(
      Math.max(leastMarginS * sampleRateHz, marginInDurations * (endSample - startSample)),
    );
    const from = Math.max(0, startSample - margin);
    const to = Math.min(frames, endSample + margin);
    const at = `at ${timeText(startSample / sampleRateHz)}${channels > 1 ? `, channel ${channel}` : ''}`;
    const seen = (names.get(at) ?? 0) + 1;
    names.set(at, seen);
    const name = seen > 1 ? `${at} (${seen})` : at;
    return { name, to: { path: `/bench/${id}`, query: { from: String(from), to: String(to) } } };
  });
}

export interface TimeMark {
  fromS: number;
  toS: number;
}

/** Places of all findings on the axis of time, notes left out. */
export function timeMarks(
  findings: readonly QualityFinding[],
  recording: Pick<Facts, 'frames' | 'sampleRateHz'>,
): TimeMark[] {
  return findings
    .filter(({ weight }) => weight !== 'note')
    .flatMap((finding) => placesWithin(finding, recording))
    .map(({ startSample, endSample }) => ({
      fromS: startSample / recording.sampleRateHz,
      toS: endSample / recording.sampleRateHz,
    }));
}
