import {
  at,
  AUDIBLE_ICE_CRACK,
  OVERDRIVEN_CRACK,
  phasesUntil,
  ULTRASONIC_ICE_CRACK,
  VESSEL_TICK,
} from './burst-families.ts';
import type { DemoRecordingSpec } from './demo-recording-spec.ts';

const ROOM_HUM = [
  { frequencyHz: 50, levelDb: -52 },
  { frequencyHz: 100, levelDb: -56 },
];
const FREEZE = phasesUntil(
  ['supercooled-liquid', 6, [at(0.2, VESSEL_TICK)]],
  ['dendritic-growth', 14, [at(2.2, AUDIBLE_ICE_CRACK)]],
  ['planar-growth', 20, [at(0.2, AUDIBLE_ICE_CRACK)]],
);

/** Recordings with something to find out: lost bands, cut peaks, names in the file. */
export const doubtfulRecordings: DemoRecordingSpec[] = [
  {
    key: 'lossy',
    fileName: 'freezer-phone_2026-01-19.wav',
    about: 'Compressed with loss before it became a WAV file: the noise floor itself ends at 16 kHz.',
    seed: 4401,
    sampleRateHz: 48_000,
    encoding: 'integer',
    bitsPerSample: 16,
    channels: 1,
    seconds: 30,
    phases: phasesUntil(
      ['not-visible', 10, [at(0.2, VESSEL_TICK)]],
      ['dendritic-growth', 20, [at(1.8, AUDIBLE_ICE_CRACK)]],
      ['not-visible', 30, [at(0.2, AUDIBLE_ICE_CRACK)]],
    ),
    noise: { pinkDb: -52, whiteDb: -60 },
    hum: ROOM_HUM,
    bandLimitHz: 16_000,
    metadata: [],
  },
  {
    key: 'upsampled',
    fileName: 'tank-07_96k.wav',
    about: 'Sampled at 44.1 kHz and converted to 96 kHz: nothing lives above the old edge at 21 kHz.',
    seed: 4402,
    sampleRateHz: 96_000,
    encoding: 'integer',
    bitsPerSample: 24,
    channels: 1,
    seconds: 20,
    phases: FREEZE,
    noise: { pinkDb: -60, whiteDb: -70 },
    hum: ROOM_HUM,
    bandLimitHz: 21_000,
    metadata: [],
  },
  {
    key: 'named-operator',
    fileName: 'tank-09_96k.wav',
    about: 'A sound recording whose header names the person who made it.',
    seed: 4403,
    sampleRateHz: 96_000,
    encoding: 'integer',
    bitsPerSample: 24,
    channels: 1,
    extensible: true,
    seconds: 20,
    phases: FREEZE,
    noise: { pinkDb: -62, whiteDb: -78 },
    hum: ROOM_HUM,
    metadata: [
      {
        kind: 'bext',
        description: 'Tank 9, brine 3.5 %, second freeze',
        originator: 'Marit Oyelaran-Vance',
        reference: 'MOV-TANK09-0002',
        date: '2026-03-04',
        time: '14:22:07',
      },
    ],
  },
  {
    key: 'overdriven',
    fileName: 'coldstage_run-19_gain-too-high.wav',
    about: 'The preamplifier was set too high: the strongest bursts are cut off at full scale.',
    seed: 4404,
    sampleRateHz: 192_000,
    encoding: 'integer',
    bitsPerSample: 16,
    channels: 1,
    seconds: 10,
    phases: phasesUntil(
      ['supercooled-liquid', 3, []],
      ['dendritic-growth', 8, [at(3, OVERDRIVEN_CRACK), at(3, ULTRASONIC_ICE_CRACK)]],
      ['planar-growth', 10, [at(0.3, ULTRASONIC_ICE_CRACK)]],
    ),
    noise: { pinkDb: -54, whiteDb: -68 },
    hum: [
      { frequencyHz: 50, levelDb: -30 },
      { frequencyHz: 100, levelDb: -36 },
      { frequencyHz: 150, levelDb: -42 },
    ],
    metadata: [],
  },
];
