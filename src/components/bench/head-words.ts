import type { Pass } from '@shared/contract/passes.ts';
import type { Recording } from '@shared/contract/recordings.ts';
import type { SensorKind } from '@shared/contract/sensors.ts';
import { kindWords } from '@/components/bench/pass-words.ts';
import { formatFrequency } from '@/composables/useFormat.ts';

const SENSOR_WORDS: Partial<Record<SensorKind, string>> = {
  'airborne-microphone': 'airborne',
  'contact-ae': 'contact',
  hydrophone: 'hydrophone',
  'camera-audio': 'camera audio',
};

/** "contact, 1 kHz to 400 kHz" */
export function sensorPill({ sensorKind, sensorLowHz, sensorHighHz }: Recording): string {
  const kind = SENSOR_WORDS[sensorKind] ?? sensorKind;
  if (sensorLowHz === null && sensorHighHz === null) return `${kind}, band unknown`;
  if (sensorLowHz === null) return `${kind}, up to ${formatFrequency(sensorHighHz)}`;
  if (sensorHighHz === null) return `${kind}, from ${formatFrequency(sensorLowHz)}`;
  return `${kind}, ${formatFrequency(sensorLowHz)} to ${formatFrequency(sensorHighHz)}`;
}

export function passPill(pass: Pass | null, canMark: boolean): string {
  if (!pass) return 'none of yours, to look at only';
  return !canMark && pass.state === 'finished' ? 'finished' : kindWords(pass);
}
