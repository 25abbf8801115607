import { at, METAL_CRACK, phasesUntil, TWIN, VESSEL_TICK, WELD_CRACK } from './burst-families.ts';
import type { DemoRecordingSpec } from './demo-recording-spec.ts';

const CASTING = { sampleRateHz: 500_000, encoding: 'integer', bitsPerSample: 16, channels: 1 } as const;
const FURNACE_HUM = [
  { frequencyHz: 50, levelDb: -46 },
  { frequencyHz: 150, levelDb: -52 },
  { frequencyHz: 250, levelDb: -58 },
  { frequencyHz: 350, levelDb: -64 },
];

/** Contact sensors on metal: nearly everything lies above hearing. */
export const metalRecordings: DemoRecordingSpec[] = [
  {
    key: 'casting-a',
    fileName: 'AlSi7_plate_03.wav',
    about:
      'A contact sensor on an aluminium casting at 500 kHz: dendrites, then the eutectic, then twins and cooling.',
    seed: 4301,
    ...CASTING,
    seconds: 15,
    phases: phasesUntil(
      ['supercooled-liquid', 3, []],
      ['dendritic-growth', 8, [at(14, METAL_CRACK)]],
      ['eutectic-growth', 11.5, [at(3, METAL_CRACK)]],
      ['cooling-solid', 15, [at(1.2, TWIN), at(0.6, VESSEL_TICK)]],
    ),
    noise: { pinkDb: -64, whiteDb: -72 },
    hum: FURNACE_HUM,
    metadata: [{ kind: 'info', entries: { ISFT: 'digitiser firmware 5.0' } }],
  },
  {
    key: 'casting-b',
    fileName: 'AlSi7_plate_04.wav',
    about: 'The next plate from the same melt, grain-refined: fewer and weaker bursts.',
    seed: 4302,
    ...CASTING,
    seconds: 10,
    phases: phasesUntil(
      ['supercooled-liquid', 2, []],
      ['dendritic-growth', 6, [at(5, METAL_CRACK)]],
      ['eutectic-growth', 8.5, [at(1.5, METAL_CRACK)]],
      ['cooling-solid', 10, [at(1, TWIN)]],
    ),
    noise: { pinkDb: -64, whiteDb: -72 },
    hum: FURNACE_HUM,
    metadata: [],
  },
  {
    key: 'weld',
    fileName: 'weld-seam_12.wav',
    about: 'Four seconds of a weld bead at 1 MHz: hot cracks of a few dozen microseconds.',
    seed: 4303,
    sampleRateHz: 1_000_000,
    encoding: 'integer',
    bitsPerSample: 16,
    channels: 1,
    seconds: 4,
    phases: phasesUntil(
      ['not-visible', 0.8, []],
      ['cellular-growth', 1.6, [at(6, WELD_CRACK)]],
      ['dendritic-growth', 3, [at(30, WELD_CRACK)]],
      ['cooling-solid', 4, [at(5, WELD_CRACK)]],
    ),
    noise: { pinkDb: -62, whiteDb: -68 },
    hum: FURNACE_HUM,
    metadata: [],
  },
];
