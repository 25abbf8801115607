import { afterAll, beforeAll, describe, expect, test } from 'vitest';
import { saveSensorSchema, saveSetupSchema } from '../../../../shared/contract/sensors.ts';
import { seedSetup } from '../../../support/server/seed-recordings.ts';
import { createTestApp, type TestApp } from '../../../support/server/test-app.ts';

let app: TestApp;
beforeAll(() => {
  app = createTestApp();
});
afterAll(() => app.close());

describe('sensors and set-ups', () => {
  test('lists show the own lab only, and naming another lab shows nothing', () => {
    const { sensors } = app.deps.services;
    const own = seedSetup(app, 'own');
    seedSetup(app, 'other');
    const contributor = app.actor('contributor');
    expect(sensors.listSetups(contributor).items).toEqual([own]);
    expect(sensors.listSensors(contributor).items.map((sensor) => sensor.id)).toEqual([own.sensorId]);
    expect(sensors.listSensors(contributor, app.otherLabId).items).toEqual([]);
  });

  test('a set-up cannot name the sensor of another lab, and the refusal does not tell whether it exists', () => {
    const { sensors } = app.deps.services;
    const foreign = seedSetup(app, 'other');
    const own = seedSetup(app, 'own');
    const contributor = app.actor('contributor');
    const withSensor = (sensorId: string) => saveSetupSchema.parse({ sensorId, name: 'Borrowed' });
    for (const sensorId of [foreign.sensorId, '01890000-0000-7000-8000-000000000000']) {
      expect(() => sensors.createSetup(contributor, withSensor(sensorId))).toThrow(
        'Sensor is of no lab that you contribute to',
      );
      expect(() => sensors.updateSetup(contributor, own.id, 1, withSensor(sensorId))).toThrow('Sensor is');
    }
  });

  test('a sensor stays with its lab', () => {
    const { sensors } = app.deps.services;
    const { sensorId } = seedSetup(app, 'own');
    const moved = saveSensorSchema.parse({ labId: app.otherLabId, name: 'Disc sensor', kind: 'contact-ae' });
    expect(() => sensors.updateSensor(app.actor('contributor'), sensorId, 1, moved)).toThrow(
      'Lab cannot change',
    );
  });

  test('the lower edge of a band lies below the upper one', () => {
    const band = { labId: app.ownLabId, name: 'Disc sensor', kind: 'contact-ae', lowHz: 9000, highHz: 900 };
    expect(saveSensorSchema.safeParse(band).error?.issues[0]).toMatchObject({
      path: ['highHz'],
      message: 'must lie above the lower edge',
    });
  });
});
