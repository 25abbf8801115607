import type { Sensor, SensorKind, Setup } from '@shared/contract/sensors.ts';
import { sensorKindWords } from '@/components/recordings/recording-words.ts';
import { formatFrequency, formatQuantity } from '@/composables/useFormat.ts';

export const sensorKindOptions = (Object.keys(sensorKindWords) as SensorKind[]).map((value) => ({
  value,
  label: sensorKindWords[value],
}));

export const automaticGainOptions = [
  { value: 'off', label: 'off' },
  { value: 'on', label: 'on' },
  { value: 'unknown', label: 'unknown' },
] as const;

/** 1 kHz to 400 kHz; one edge may be unknown. */
export function formatBand(lowHz: number | null, highHz: number | null): string {
  if (lowHz === null && highHz === null) return 'unknown';
  if (lowHz === null) return `up to ${formatFrequency(highHz)}`;
  if (highHz === null) return `from ${formatFrequency(lowHz)}`;
  return `${formatFrequency(lowHz)} to ${formatFrequency(highHz)}`;
}

export function modelOf({ model, serial }: Sensor): string {
  const parts = [model, serial && `serial ${serial}`].filter(Boolean);
  return parts.length > 0 ? parts.join(', ') : 'unknown';
}

export function quantityOrUnknown(value: number | null, unit: string): string {
  return value === null ? 'unknown' : formatQuantity(value, unit, 4);
}

/** 10 V, preamplifier 40 dB. */
export function formatChain({
  fullScaleV,
  preampGainDb,
}: Pick<Setup, 'fullScaleV' | 'preampGainDb'>): string {
  const scale = fullScaleV === null ? 'full scale unknown' : formatQuantity(fullScaleV, 'V', 4);
  const gain =
    preampGainDb === null ? 'gain unknown' : `preamplifier ${formatQuantity(preampGainDb, 'dB', 4)}`;
  return `${scale}, ${gain}`;
}

/** In a select: what tells one set-up from another. */
export function setupLabel(setup: Setup): string {
  return `${setup.name} (${setup.sensorName}, ${formatBand(setup.sensorLowHz, setup.sensorHighHz)})`;
}
