import { mount } from '@vue/test-utils';
import { describe, expect, it } from 'vitest';
import { processSchema, saveRunSchema } from '@shared/contract/runs.ts';
import type { Run } from '@shared/contract/runs.ts';
import CautionNotes from '@/components/runs/CautionNotes.vue';
import RunConflict from '@/components/runs/RunConflict.vue';
import RunFields from '@/components/runs/RunFields.vue';
import { cautionsFor } from '@/components/runs/run-cautions.ts';
import { emptyRunDraft, runDifferences, toNextRunDraft, toRunDraft } from '@/components/runs/run-draft.ts';
import { formatPressure, processOptions, runFacts } from '@/components/runs/run-words.ts';

const labId = '019a0000-0000-7000-8000-000000000001';
const run: Run = {
  id: labId,
  labId,
  labName: 'Northlight Solidification Lab',
  title: 'Film 07',
  kind: 'experiment',
  material: 'water',
  composition: null,
  process: 'droplet-freezing',
  container: 'glass slide',
  cooling: null,
  coolingRateKPerS: 2.5,
  pressurePa: 101_325,
  startTemperatureC: null,
  supercoolingK: null,
  startedAt: null,
  specimen: 'droplet 4',
  credits: [{ name: 'Signe Halloran', orcid: null, role: 'camera' }],
  notes: 'Two tries.',
  createdAt: '2026-03-02T10:00:00.000Z',
  revision: 3,
  recordingCount: 1,
  editable: true,
};
const quiet = { process: 'droplet-freezing', material: 'water', container: null, cooling: null } as const;

describe('the facts of a run', () => {
  it('have units, and say unknown where nothing is known', () => {
    const byKey = new Map(runFacts(run).map(({ key, value }) => [key, value.replace(/\u00A0/g, ' ')]));
    expect(byKey.get('rate')).toBe('2.5 K/s');
    expect(byKey.get('pressure')).toBe('101.325 kPa');
    expect(byKey.get('supercooling')).toBe('unknown');
    expect(byKey.get('composition')).toBe('unknown');
  });

  it('give a pressure in the step in which it is short', () => {
    expect(formatPressure(12e6)).toBe('12\u00A0MPa');
    expect(formatPressure(0.02)).toBe('0.02\u00A0Pa');
  });

  it('have words for every process', () => {
    expect(processOptions.map(({ value }) => value)).toEqual(processSchema.options);
  });
});

describe('cautions', () => {
  it('stay silent where nothing told calls for one', () => {
    expect(cautionsFor({ ...quiet, pressurePa: 101_325 })).toEqual([]);
    const wrapper = mount(CautionNotes, { props: { cautions: [] } });
    expect(wrapper.text()).toBe('');
  });

  it('speak of evacuated glass at low pressure', () => {
    expect(cautionsFor({ ...quiet, pressurePa: 20 })).toEqual(['Evacuated glass can implode.']);
  });

  it('speak of cryogens where one cools', () => {
    const cautions = cautionsFor({ ...quiet, cooling: 'liquid nitrogen jet', pressurePa: null });
    expect(cautions).toEqual(['Cryogens displace oxygen and burn.']);
  });

  it('speak of molten metal where metal is melted, and defer to the lab', () => {
    const cautions = cautionsFor({ ...quiet, process: 'casting', pressurePa: null });
    expect(cautions).toEqual(['Molten metal and water do not meet.']);
    const wrapper = mount(CautionNotes, { props: { cautions } });
    expect(wrapper.text()).toContain('safety rules of your lab come first');
  });
});

describe('the draft of a run', () => {
  it('comes back from the form as it was', () => {
    const input = saveRunSchema.parse(toRunDraft(run));
    expect(input).toMatchObject({ title: 'Film 07', composition: null, coolingRateKPerS: 2.5 });
    expect(runDifferences(input, saveRunSchema.parse(run))).toEqual([]);
  });

  it('takes over for the next run what belongs to the series, not what belongs to the one', () => {
    const next = toNextRunDraft(run);
    expect(next).toMatchObject({
      title: '',
      specimen: '',
      notes: '',
      material: 'water',
      pressurePa: 101_325,
    });
  });

  it('says where two versions differ, in words', () => {
    const mine = saveRunSchema.parse({ ...toRunDraft(run), pressurePa: 5000 });
    const theirs = saveRunSchema.parse({ ...run, composition: 'distilled' });
    expect(runDifferences(mine, theirs)).toEqual([
      { label: 'Composition and purity', mine: 'unknown', theirs: 'distilled' },
      { label: 'Pressure in Pa', mine: '5000', theirs: '101325' },
    ]);
  });
});

describe('the form of a run', () => {
  it('names the fault at its field, in words', () => {
    const wrapper = mount(RunFields, {
      props: {
        modelValue: emptyRunDraft(labId),
        labs: [{ value: labId, label: 'Northlight' }],
        messages: { title: 'needs at least 3 characters', process: 'Invalid option' },
        isLabFixed: false,
      },
    });
    expect(wrapper.text()).toContain('Title needs at least 3 characters.');
    expect(wrapper.text()).toContain('Process is needed.');
  });

  it('shows a caution as soon as a condition calls for one', () => {
    const wrapper = mount(RunFields, {
      props: {
        modelValue: { ...emptyRunDraft(labId), cooling: 'Liquid Nitrogen' },
        labs: [],
        messages: {},
        isLabFixed: false,
      },
    });
    expect(wrapper.text()).toContain('Cryogens displace oxygen and burn.');
  });

  it('leaves the choice of a conflict to the person', async () => {
    const differences = [{ label: 'Title', mine: 'Film 7', theirs: 'Film 07' }];
    const wrapper = mount(RunConflict, { props: { differences } });
    expect(wrapper.find('tbody').text()).toContain('Film 07');
    const [mine, theirs] = wrapper.findAll('button');
    await mine?.trigger('click');
    await theirs?.trigger('click');
    expect(wrapper.emitted()).toMatchObject({ keepMine: [[]], takeTheirs: [[]] });
  });
});
