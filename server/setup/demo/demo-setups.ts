import type { SaveSensor, SaveSetup } from '../../../shared/contract/sensors.ts';
import type { DemoLab } from './demo-people.ts';

interface DemoSetup {
  lab: DemoLab;
  sensor: Omit<SaveSensor, 'labId'>;
  setup: Omit<SaveSetup, 'sensorId'>;
}

const unfiltered = { filterLowHz: null, filterHighHz: null, automaticGain: 'off', checkedAt: null } as const;

/** Invented sensors as they were mounted, by a key that the runs name. */
export const demoSetups = {
  'air-microphone': {
    lab: 'northlight',
    sensor: {
      name: 'Air microphone A',
      kind: 'airborne-microphone',
      model: 'Lindqvist LM-2',
      serial: '0417',
      lowHz: 20,
      highHz: 22_000,
      sensitivity: '12 mV/Pa',
    },
    setup: {
      name: 'Over the flask, 20 cm',
      coupling: 'air',
      mounting: 'clamp on the stand, foam under it',
      distanceM: 0.2,
      preampGainDb: 20,
      fullScaleV: null,
      ...unfiltered,
    },
  },
  'stage-ultrasonic': {
    lab: 'northlight',
    sensor: {
      name: 'Ultrasonic microphone U1',
      kind: 'airborne-microphone',
      model: 'Lindqvist LM-9U',
      serial: '0023',
      lowHz: 1000,
      highHz: 85_000,
      sensitivity: '0.9 mV/Pa',
    },
    setup: {
      name: 'Cold stage, 8 cm above the droplet',
      coupling: 'air',
      mounting: 'arm of the cold stage, silicone between',
      distanceM: 0.08,
      preampGainDb: 30,
      fullScaleV: 2,
      ...unfiltered,
    },
  },
  'tank-hydrophone': {
    lab: 'northlight',
    sensor: {
      name: 'Tank hydrophone',
      kind: 'hydrophone',
      model: 'Ostara HX',
      serial: '118',
      lowHz: 10,
      highHz: 45_000,
      sensitivity: null,
    },
    setup: {
      name: 'Tank, 30 cm from the plate',
      coupling: 'water',
      mounting: 'hung from a line',
      distanceM: 0.3,
      preampGainDb: null,
      fullScaleV: null,
      ...unfiltered,
      automaticGain: 'unknown',
    },
  },
  'casting-contact': {
    lab: 'brineworks',
    sensor: {
      name: 'Contact sensor C4',
      kind: 'contact-ae',
      model: 'Halden W150',
      serial: 'C4-0091',
      lowHz: 1000,
      highHz: 220_000,
      sensitivity: null,
    },
    setup: {
      name: 'Waveguide on the mould, 40 dB',
      coupling: 'steel waveguide, high-temperature grease',
      mounting: 'spring clamp on the waveguide',
      distanceM: 0.15,
      preampGainDb: 40,
      fullScaleV: 10,
      ...unfiltered,
    },
  },
  'weld-contact': {
    lab: 'brineworks',
    sensor: {
      name: 'Contact sensor C7',
      kind: 'contact-ae',
      model: 'Halden W300',
      serial: 'C7-0012',
      lowHz: 1000,
      highHz: 400_000,
      sensitivity: null,
    },
    setup: {
      name: 'Base plate of the weld bench, 40 dB',
      coupling: 'grease',
      mounting: 'magnetic holder, 6 cm beside the seam',
      distanceM: 0.06,
      preampGainDb: 40,
      fullScaleV: 10,
      ...unfiltered,
    },
  },
} as const satisfies Record<string, DemoSetup>;
export type DemoSetupKey = keyof typeof demoSetups;
