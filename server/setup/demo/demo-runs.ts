import type { Sensitivity } from '../../../shared/contract/recordings.ts';
import type { Licence } from '../../../shared/contract/licence.ts';
import type { SaveRun } from '../../../shared/contract/runs.ts';
import type { DemoLab } from './demo-people.ts';
import type { DemoSetupKey } from './demo-setups.ts';

export interface DemoRun {
  lab: DemoLab;
  setup: DemoSetupKey;
  run: Pick<SaveRun, 'title' | 'kind' | 'material' | 'process'> & Partial<SaveRun>;
  /** Keys of the recordings of this run. */
  recordings: string[];
  licence?: Licence;
  sensitivity?: Sensitivity[];
}

const coldStage: Omit<DemoRun['run'], 'title'> = {
  kind: 'experiment',
  material: 'water',
  composition: 'deionised, degassed',
  process: 'droplet-freezing',
  container: 'polished copper, hydrophobic coat',
  cooling: 'two-stage Peltier element, water-cooled',
  pressurePa: 101_300,
  credits: [
    { name: 'Tomasz Brandvold', orcid: null, role: 'experiment' },
    { name: 'Signe Halloran', orcid: null, role: 'camera' },
  ],
};
const casting: Omit<DemoRun['run'], 'title'> = {
  kind: 'experiment',
  material: 'aluminium-silicon alloy',
  composition: 'Al with 7 % Si by mass',
  process: 'casting',
  container: 'steel mould, boron nitride wash',
  cooling: 'air-cooled mould',
  pressurePa: 101_300,
  startTemperatureC: 690,
  credits: [{ name: 'Leocadia Finnigan', orcid: null, role: 'experiment' }],
};

/** The runs of both labs, newest last. */
export const demoRuns: DemoRun[] = [
  {
    lab: 'northlight',
    setup: 'air-microphone',
    run: {
      ...coldStage,
      title: 'Flask 04, slow cooling',
      process: 'bulk-freezing',
      composition: 'tap water, boiled',
      container: 'evacuated glass flask, 250 ml',
      cooling: 'freezer at -18 °C',
      coolingRateKPerS: 0.002,
      supercoolingK: 4.5,
      startedAt: '2026-01-12T09:20:00.000Z',
      notes: 'Evacuated glass: behind a shield, with eye protection, by the rules of the lab.',
    },
    recordings: ['flask-slow-cooling', 'flask-float'],
  },
  {
    lab: 'northlight',
    setup: 'air-microphone',
    run: {
      ...coldStage,
      title: 'Freezer shelf, telephone beside it',
      process: 'bulk-freezing',
      container: 'plastic cup',
      cooling: 'freezer at -18 °C',
      startedAt: '2026-01-19T15:05:00.000Z',
    },
    recordings: ['lossy'],
  },
  {
    lab: 'northlight',
    setup: 'tank-hydrophone',
    run: {
      ...coldStage,
      title: 'Tank series, freezing from a cold plate',
      process: 'directional-solidification',
      composition: 'tap water',
      container: 'glass tank, 12 l',
      cooling: 'brine through a copper plate',
      startedAt: '2026-02-03T10:40:00.000Z',
    },
    recordings: ['upsampled', 'named-operator'],
  },
  {
    lab: 'northlight',
    setup: 'stage-ultrasonic',
    run: {
      ...coldStage,
      title: 'Cold stage 17, strongly supercooled droplet',
      coolingRateKPerS: 0.05,
      supercoolingK: 12.4,
      startTemperatureC: 4,
      startedAt: '2026-03-02T13:10:00.000Z',
      specimen: 'droplet of 40 microlitres',
    },
    recordings: ['stage-dendritic-a'],
  },
  {
    lab: 'northlight',
    setup: 'stage-ultrasonic',
    run: {
      ...coldStage,
      title: 'Cold stage 18, weakly supercooled droplet',
      coolingRateKPerS: 0.05,
      supercoolingK: 6.1,
      startTemperatureC: 4,
      startedAt: '2026-03-02T15:30:00.000Z',
      specimen: 'droplet of 40 microlitres',
    },
    recordings: ['stage-dendritic-b'],
  },
  {
    lab: 'northlight',
    setup: 'stage-ultrasonic',
    run: {
      ...coldStage,
      title: 'Cold stage 19, gain set too high',
      supercoolingK: 11.8,
      startedAt: '2026-03-03T09:45:00.000Z',
    },
    recordings: ['overdriven'],
  },
  {
    lab: 'northlight',
    setup: 'stage-ultrasonic',
    run: {
      ...coldStage,
      title: 'Cold stage 21, two microphones',
      supercoolingK: 10.2,
      startedAt: '2026-03-05T11:00:00.000Z',
    },
    recordings: ['stage-two-channels'],
  },
  {
    lab: 'northlight',
    setup: 'stage-ultrasonic',
    run: {
      ...coldStage,
      title: 'Cold stage 22, smooth front',
      process: 'directional-solidification',
      cooling: 'gradient of 3 K/mm, pulled at 2 micrometres per second',
      startedAt: '2026-03-06T10:00:00.000Z',
    },
    recordings: ['stage-planar'],
  },
  {
    lab: 'northlight',
    setup: 'stage-ultrasonic',
    run: {
      ...coldStage,
      title: 'Cold stage, control without a droplet',
      kind: 'control',
      startedAt: '2026-03-06T14:20:00.000Z',
    },
    recordings: ['stage-control'],
    licence: 'CC0-1.0',
  },
  {
    lab: 'brineworks',
    setup: 'casting-contact',
    run: { ...casting, title: 'Plate 03, not refined', startedAt: '2026-04-14T08:15:00.000Z' },
    recordings: ['casting-a'],
  },
  {
    lab: 'brineworks',
    setup: 'casting-contact',
    run: {
      ...casting,
      title: 'Plate 04, grain-refined',
      startedAt: '2026-04-14T10:50:00.000Z',
      notes: 'Grain refiner of a partner; its make is not to be told.',
    },
    recordings: ['casting-b'],
    sensitivity: ['partner-agreement'],
  },
  {
    lab: 'brineworks',
    setup: 'weld-contact',
    run: {
      ...casting,
      title: 'Weld seam 12',
      material: 'stainless steel',
      composition: 'austenitic',
      process: 'welding',
      container: null,
      cooling: 'still air',
      startTemperatureC: 20,
      startedAt: '2026-05-08T12:30:00.000Z',
      credits: [],
    },
    recordings: ['weld'],
  },
];
