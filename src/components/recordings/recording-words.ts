import type { Processing, Recording, RecordingListItem, Sharing } from '@shared/contract/recordings.ts';
import { MEASURING_STOPPED } from '@shared/domain/recording-status.ts';
import type { SensorKind } from '@shared/contract/sensors.ts';
import { formatShare } from '@/composables/useFormat.ts';

export interface Words {
  value: string;
  tone: 'plain' | 'melt' | 'glow';
}

const processingWords: Readonly<Record<Processing, Words>> = {
  queued: { value: 'waits to be measured', tone: 'plain' },
  measuring: { value: 'being measured', tone: 'melt' },
  measured: { value: 'measured', tone: 'plain' },
  failed: { value: 'measurement failed', tone: 'glow' },
};

export function wordsOfProcessing({
  processing,
  progress,
  failure,
}: Pick<Recording, 'processing' | 'progress'> & Partial<Pick<Recording, 'failure'>>): Words {
  if (failure === MEASURING_STOPPED) return { value: 'measuring stopped', tone: 'plain' };
  const words = processingWords[processing];
  return processing === 'measuring' ? { ...words, value: `${words.value}, ${formatShare(progress)}` } : words;
}

export const sharingWords: Readonly<Record<Sharing, Words>> = {
  pending: { value: 'not shared yet', tone: 'plain' },
  held: { value: 'held for a reviewer', tone: 'glow' },
  lab: { value: 'for the lab only', tone: 'plain' },
  embargoed: { value: 'under embargo', tone: 'glow' },
  shared: { value: 'shared', tone: 'plain' },
  refused: { value: 'refused', tone: 'glow' },
  withdrawn: { value: 'withdrawn', tone: 'glow' },
};

/** What a state of sharing means for the person who looks; the usual ones need no explaining. */
export function meaningOfSharing(sharing: Sharing): { title: string; sentence: string } | null {
  const meanings: Partial<Record<Sharing, { title: string; sentence: string }>> = {
    held: {
      title: 'Held for a reviewer',
      sentence:
        'Something declared about it or found in it may be sensitive. Nobody outside the lab sees or hears it until a reviewer who did not bring it in has decided.',
    },
    lab: {
      title: 'For the lab only',
      sentence: 'A reviewer decided that it stays with its lab. It is measured, but never part of a release.',
    },
    embargoed: {
      title: 'Under embargo',
      sentence: 'It stays with its lab for now. When the date has passed, a reviewer decides again.',
    },
    refused: { title: 'Refused', sentence: 'A reviewer decided that it may not be shared at all.' },
    withdrawn: {
      title: 'Withdrawn',
      sentence: 'Its lab has taken it back; releases that hold it keep their checksums.',
    },
  };
  return meanings[sharing] ?? null;
}

/** In the table: what is known about ultrasound, in two words. */
export function wordsOfVerdict({ ultrasonicVerdict }: Pick<RecordingListItem, 'ultrasonicVerdict'>): string {
  if (ultrasonicVerdict === 'found') return 'found';
  if (ultrasonicVerdict === 'not-found') return 'not found';
  return ultrasonicVerdict === 'not-observable' ? 'not observable' : '';
}

export const sensorKindWords: Readonly<Record<SensorKind, string>> = {
  'airborne-microphone': 'airborne microphone',
  'contact-ae': 'contact sensor',
  hydrophone: 'hydrophone',
  'camera-audio': 'sound of a camera',
  other: 'other sensor',
};
