import type { SaveSetup, Sensor, Setup } from '../../../shared/contract/sensors.ts';
import { toInstant } from '../../services/clock.ts';
import type { SensorView, SetupView } from './sensors.queries.ts';

export function toSensor({ sensor, labName }: SensorView): Sensor {
  const { createdAtMs, ...facts } = sensor;
  return { ...facts, labName, createdAt: toInstant(createdAtMs) };
}

export function toSetup({ setup, sensor }: SetupView): Setup {
  const { createdAtMs, checkedAtMs, ...facts } = setup;
  return {
    ...facts,
    labId: sensor.labId,
    sensorName: sensor.name,
    sensorKind: sensor.kind,
    sensorLowHz: sensor.lowHz,
    sensorHighHz: sensor.highHz,
    checkedAt: checkedAtMs === null ? null : toInstant(checkedAtMs),
    createdAt: toInstant(createdAtMs),
  };
}

export function toSetupValues({ checkedAt, ...facts }: SaveSetup) {
  return { ...facts, checkedAtMs: checkedAt === null ? null : Date.parse(checkedAt) };
}
