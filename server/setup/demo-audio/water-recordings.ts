import {
  at,
  AUDIBLE_ICE_CRACK,
  BUBBLE,
  phasesUntil,
  ULTRASONIC_ICE_CRACK,
  VESSEL_TICK,
} from './burst-families.ts';
import type { DemoRecordingSpec } from './demo-recording-spec.ts';

/** Lines of a cold stage's compressor on a 50 Hz supply. */
const COMPRESSOR_HUM = [
  { frequencyHz: 50, levelDb: -42 },
  { frequencyHz: 100, levelDb: -47 },
  { frequencyHz: 150, levelDb: -54 },
  { frequencyHz: 200, levelDb: -57 },
  { frequencyHz: 300, levelDb: -63 },
  { frequencyHz: 400, levelDb: -70 },
];
const BATH_HUM = [
  { frequencyHz: 50, levelDb: -50 },
  { frequencyHz: 100, levelDb: -45 },
  { frequencyHz: 300, levelDb: -62 },
];
const STAGE = {
  sampleRateHz: 192_000,
  encoding: 'integer',
  bitsPerSample: 24,
  channels: 1,
  extensible: true,
} as const;
const STAGE_NOISE = { pinkDb: -66, whiteDb: -80 };

/** Water and ice: flasks within hearing, cold stages up to 96 kHz. */
export const waterRecordings: DemoRecordingSpec[] = [
  {
    key: 'flask-slow-cooling',
    fileName: 'flask-04_slow-cooling.wav',
    about:
      'A flask of degassed water in a cold bath: cracks that can be heard, nothing can be said above 20 kHz.',
    seed: 4101,
    sampleRateHz: 48_000,
    encoding: 'integer',
    bitsPerSample: 16,
    channels: 1,
    seconds: 60,
    phases: phasesUntil(
      ['supercooled-liquid', 18, [at(0.12, VESSEL_TICK)]],
      ['recalescence', 19, [at(4, AUDIBLE_ICE_CRACK)]],
      ['dendritic-growth', 31, [at(2.6, AUDIBLE_ICE_CRACK)]],
      ['planar-growth', 52, [at(0.15, AUDIBLE_ICE_CRACK), at(0.2, BUBBLE)]],
      ['cooling-solid', 60, [at(0.3, VESSEL_TICK), at(0.25, AUDIBLE_ICE_CRACK)]],
    ),
    noise: { pinkDb: -62, whiteDb: -76 },
    hum: BATH_HUM,
    metadata: [{ kind: 'info', entries: { ISFT: 'bench recorder 2.1', ICRD: '2026-02-11' } }],
  },
  {
    key: 'flask-float',
    fileName: 'flask-05_float.wav',
    about: 'The same bath with tap water, written as 32-bit float: more bubbles, fewer cracks.',
    seed: 4102,
    sampleRateHz: 48_000,
    encoding: 'float',
    bitsPerSample: 32,
    channels: 1,
    seconds: 30,
    phases: phasesUntil(
      ['supercooled-liquid', 8, [at(0.2, VESSEL_TICK)]],
      ['dendritic-growth', 15, [at(2.2, AUDIBLE_ICE_CRACK), at(0.6, BUBBLE)]],
      ['planar-growth', 30, [at(0.1, AUDIBLE_ICE_CRACK), at(0.8, BUBBLE)]],
    ),
    noise: { pinkDb: -60, whiteDb: -74 },
    hum: BATH_HUM,
    metadata: [],
  },
  {
    key: 'stage-dendritic-a',
    fileName: 'coldstage_run-17.wav',
    about:
      'A droplet on a cold stage at 192 kHz: dense bursts below and above the hearing line while dendrites grow.',
    seed: 4201,
    ...STAGE,
    seconds: 30,
    phases: phasesUntil(
      ['supercooled-liquid', 9, [at(0.15, VESSEL_TICK)]],
      ['nucleation', 9.2, []],
      ['recalescence', 10, [at(8, ULTRASONIC_ICE_CRACK)]],
      ['dendritic-growth', 18, [at(3, AUDIBLE_ICE_CRACK), at(9, ULTRASONIC_ICE_CRACK)]],
      ['planar-growth', 26, [at(0.15, AUDIBLE_ICE_CRACK), at(0.2, ULTRASONIC_ICE_CRACK)]],
      ['cooling-solid', 30, [at(0.4, VESSEL_TICK), at(0.3, ULTRASONIC_ICE_CRACK)]],
    ),
    noise: STAGE_NOISE,
    hum: COMPRESSOR_HUM,
    metadata: [],
  },
  {
    key: 'stage-dendritic-b',
    fileName: 'coldstage_run-18.wav',
    about: 'A second droplet, less supercooled: a shorter dendritic phase with fewer bursts.',
    seed: 4202,
    ...STAGE,
    seconds: 20,
    phases: phasesUntil(
      ['supercooled-liquid', 5, []],
      ['recalescence', 5.6, [at(6, ULTRASONIC_ICE_CRACK)]],
      ['dendritic-growth', 10, [at(2, AUDIBLE_ICE_CRACK), at(6, ULTRASONIC_ICE_CRACK)]],
      ['planar-growth', 20, [at(0.1, AUDIBLE_ICE_CRACK), at(0.15, ULTRASONIC_ICE_CRACK)]],
    ),
    noise: STAGE_NOISE,
    hum: COMPRESSOR_HUM,
    metadata: [],
  },
  {
    key: 'stage-two-channels',
    fileName: 'coldstage_run-21_two-mics.wav',
    about: 'Two microphones over one droplet: each burst reaches the second one 63 samples later and weaker.',
    seed: 4203,
    ...STAGE,
    channels: 2,
    seconds: 12,
    phases: phasesUntil(
      ['supercooled-liquid', 3, []],
      ['dendritic-growth', 8, [at(2, AUDIBLE_ICE_CRACK), at(6, ULTRASONIC_ICE_CRACK)]],
      ['planar-growth', 12, [at(0.25, ULTRASONIC_ICE_CRACK)]],
    ),
    noise: STAGE_NOISE,
    hum: COMPRESSOR_HUM,
    otherChannels: { delaySamples: 63, levelDb: -5 },
    metadata: [],
  },
  {
    key: 'stage-planar',
    fileName: 'coldstage_run-22_directional.wav',
    about: 'Directional solidification with a smooth front: planar growth all along and hardly a burst.',
    seed: 4204,
    ...STAGE,
    seconds: 20,
    phases: phasesUntil(
      ['supercooled-liquid', 3, []],
      ['planar-growth', 20, [at(0.12, AUDIBLE_ICE_CRACK), at(0.2, ULTRASONIC_ICE_CRACK)]],
    ),
    noise: STAGE_NOISE,
    hum: COMPRESSOR_HUM,
    metadata: [],
  },
  {
    key: 'stage-control',
    fileName: 'coldstage_control_no-sample.wav',
    about: 'The cold stage without a sample: compressor hum and noise, no burst at all.',
    seed: 4205,
    ...STAGE,
    seconds: 15,
    phases: phasesUntil(['not-visible', 15, []]),
    noise: STAGE_NOISE,
    hum: COMPRESSOR_HUM,
    metadata: [],
  },
];
