import type { Recording } from '@shared/contract/recordings.ts';
import { nameOfContainer } from '@/components/recordings/format-words.ts';
import { formatBytes } from '@/composables/useFormat.ts';

export interface DownloadLink {
  label: string;
  /** Its address is made by the page. */
  href: string;
  fileName: string;
}

/** Something to take along: one file, or one for each channel. */
export interface Download {
  label: string;
  detail: string;
  links: DownloadLink[];
}

export type DownloadKind = 'audio' | 'frames.csv' | 'spectrum' | 'candidates.csv' | 'candidates.jsonl';
export type AddressOf = (kind: DownloadKind, channel?: number) => string;

type Facts = Pick<
  Recording,
  'fileName' | 'format' | 'sizeBytes' | 'processing' | 'blind' | 'isSoundWithheld' | 'may' | 'channels'
>;

/** What can be taken along of a recording; whoever works blind gets what was recorded, not what was found. */
export function downloadsOf(recording: Facts, addressOf: AddressOf): Download[] {
  const { fileName, format, sizeBytes, processing, blind, may } = recording;
  const isMeasured = processing === 'measured' && !recording.isSoundWithheld;
  const one = (label: string, detail: string, kind: DownloadKind, ending = `.${kind}`): Download => ({
    label,
    detail,
    links: [{ label, href: addressOf(kind), fileName: `${fileName}${ending}` }],
  });
  return [
    ...(may.downloadAudio
      ? [one('Original file', `${nameOfContainer(format.container)}, ${formatBytes(sizeBytes)}`, 'audio', '')]
      : []),
    ...(isMeasured && !blind
      ? [
          ofChannels(recording, 'Descriptors of every frame', 'CSV', (channel) => ({
            href: addressOf('frames.csv', channel),
            ending: 'frames.csv',
          })),
        ]
      : []),
    ...(isMeasured
      ? [
          ofChannels(recording, 'Spectrum while quiet and active', 'JSON', (channel) => ({
            href: addressOf('spectrum', channel),
            ending: 'spectrum.json',
          })),
        ]
      : []),
    ...(isMeasured && !blind
      ? [
          one('All candidates, as a table', 'CSV', 'candidates.csv'),
          one('All candidates, as lines', 'JSON lines', 'candidates.jsonl'),
        ]
      : []),
  ];
}

function ofChannels(
  { fileName, channels }: Facts,
  label: string,
  detail: string,
  fileOf: (channel: number) => { href: string; ending: string },
): Download {
  const links = Array.from({ length: channels }, (_value, channel) => {
    const { href, ending } = fileOf(channel);
    return {
      label: channels === 1 ? label : `channel ${channel}`,
      href,
      fileName: `${fileName}.channel-${channel}.${ending}`,
    };
  });
  return { label, detail, links };
}
