import type { AudioFormat } from '@shared/contract/measurement.ts';
import { formatBytes, formatCount, formatDuration, formatSampleRate } from '@/composables/useFormat.ts';

type Samples = Pick<AudioFormat, 'container' | 'encoding' | 'bitsPerSample' | 'channels'>;

const containerNames: Readonly<Record<AudioFormat['container'], string>> = {
  RIFF: 'WAV',
  RF64: 'WAV (RF64)',
  BW64: 'WAV (BW64)',
  FLAC: 'FLAC',
  raw: 'Raw samples',
  CSV: 'CSV',
  'capture-set': 'Capture set',
};

export function nameOfContainer(container: AudioFormat['container']): string {
  return containerNames[container];
}

/** WAV, 16-bit integer, 1 channel. */
export function formatOfFile({ container, encoding, bitsPerSample, channels }: Samples): string {
  return `${containerNames[container]}, ${bitsPerSample}-bit ${encoding}, ${formatCount(channels, 'channel')}`;
}

/** Rate and length as they were in life: a file that plays ten times slower was recorded at ten times the rate. */
export function rateAndLength(
  { sampleRateHz, frames }: Pick<AudioFormat, 'sampleRateHz' | 'frames'>,
  timeExpansion: number,
): { rate: string; length: string } {
  const trueRateHz = sampleRateHz * timeExpansion;
  return { rate: formatSampleRate(trueRateHz), length: formatDuration(frames / trueRateHz, 4) };
}

/** 86.4 s, 172.8 MB. */
export function lengthAndSize(durationS: number, sizeBytes: number): string {
  return `${formatDuration(durationS, 4)}, ${formatBytes(sizeBytes)}`;
}
