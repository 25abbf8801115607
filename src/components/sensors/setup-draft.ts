import type { Setup } from '@shared/contract/sensors.ts';

/** What the form of a set-up holds: texts are never null there. */
export function toSetupDraft(setup: Setup | null, sensorId: string) {
  return {
    sensorId: setup?.sensorId ?? sensorId,
    name: setup?.name ?? '',
    coupling: setup?.coupling ?? '',
    mounting: setup?.mounting ?? '',
    distanceM: setup?.distanceM ?? null,
    preampGainDb: setup?.preampGainDb ?? null,
    filterLowHz: setup?.filterLowHz ?? null,
    filterHighHz: setup?.filterHighHz ?? null,
    automaticGain: setup?.automaticGain ?? ('unknown' as const),
    fullScaleV: setup?.fullScaleV ?? null,
    checkedAt: setup?.checkedAt ?? null,
  };
}
