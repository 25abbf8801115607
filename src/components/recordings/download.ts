import type { Recording } from '@shared/contract/recordings.ts';
import { formatBytes } from '@/composables/useFormat.ts';

/** A file to take along; its address is made by the page. */
export interface Download {
  label: string;
  detail: string;
  href: string;
  fileName: string;
}

type Kind = 'audio' | 'frames.csv' | 'spectrum' | 'candidates';

/** What can be taken along of a recording; whoever works blind gets what was recorded, not what was found. */
export function downloadsOf(
  recording: Pick<Recording, 'fileName' | 'sizeBytes' | 'processing' | 'blind' | 'may'>,
  addressOf: (kind: Kind) => string,
): Download[] {
  const { fileName, sizeBytes, processing, blind, may } = recording;
  const isMeasured = processing === 'measured';
  const item = (kind: Kind, label: string, detail: string, ending: string): Download => ({
    ...{ label, detail },
    href: addressOf(kind),
    fileName: ending === '' ? fileName : `${fileName}.${ending}`,
  });
  return [
    ...(may.downloadAudio ? [item('audio', 'Original file', `WAV, ${formatBytes(sizeBytes)}`, '')] : []),
    ...(isMeasured
      ? [
          item('frames.csv', 'Descriptors of every frame', 'CSV', 'frames.csv'),
          item('spectrum', 'Spectrum while quiet and active', 'JSON', 'spectrum.json'),
        ]
      : []),
    ...(isMeasured && !blind
      ? [item('candidates', 'Candidates, the first 2\u202F000', 'JSON', 'candidates.json')]
      : []),
  ];
}
