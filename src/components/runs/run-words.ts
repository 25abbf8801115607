import type { Process, Run, RunKind } from '@shared/contract/runs.ts';
import type { ChoiceOption } from '@/components/app/choice-option.ts';
import type { Fact } from '@/components/app/fact.ts';
import { formatDateTime, formatQuantity, formatUtc } from '@/composables/useFormat.ts';

export const kindWords: Readonly<Record<RunKind, string>> = {
  experiment: 'experiment',
  control: 'control without sample',
  'sensor-check': 'sensor check',
};

export const processWords: Readonly<Record<Process, string>> = {
  'droplet-freezing': 'droplet freezing',
  'bulk-freezing': 'bulk freezing',
  'directional-solidification': 'directional solidification',
  casting: 'casting',
  welding: 'welding',
  'metal-printing': 'metal printing',
  other: 'other',
};

function toOptions<Value extends string>(words: Readonly<Record<Value, string>>): ChoiceOption<Value>[] {
  return (Object.keys(words) as Value[]).map((value) => ({ value, label: words[value] }));
}

export const kindOptions = toOptions(kindWords);
export const processOptions = toOptions(processWords);

export const UNKNOWN = 'unknown';

type Conditions = Omit<Run, 'id' | 'labId' | 'labName' | 'createdAt' | 'revision' | 'editable'>;

function quantity(value: number | null, unit: string): string {
  return value === null ? UNKNOWN : formatQuantity(value, unit, 6);
}

/** 2.5 kPa, 101.325 kPa, 12 MPa: the step in which the figure is short. */
export function formatPressure(pressurePa: number | null): string {
  if (pressurePa === null) return UNKNOWN;
  if (pressurePa >= 1e6) return formatQuantity(pressurePa / 1e6, 'MPa', 6);
  return pressurePa >= 1000
    ? formatQuantity(pressurePa / 1000, 'kPa', 6)
    : formatQuantity(pressurePa, 'Pa', 4);
}

function words(key: string, term: string, value: string | null): Fact {
  return { key, term, value: value ?? UNKNOWN, isWords: true };
}

/** Everything told about a run, with what is not known said as such. */
export function runFacts(run: Conditions): Fact[] {
  return [
    words('kind', 'Kind', kindWords[run.kind]),
    words('material', 'Material', run.material),
    words('composition', 'Composition and purity', run.composition),
    words('specimen', 'Specimen', run.specimen),
    words('process', 'Process', processWords[run.process]),
    words('container', 'Container or substrate', run.container),
    words('cooling', 'Cooling', run.cooling),
    { key: 'rate', term: 'Cooling rate', value: quantity(run.coolingRateKPerS, 'K/s') },
    { key: 'pressure', term: 'Pressure', value: formatPressure(run.pressurePa) },
    { key: 'start', term: 'Temperature at the start', value: quantity(run.startTemperatureC, '°C') },
    { key: 'supercooling', term: 'Supercooling', value: quantity(run.supercoolingK, 'K') },
    {
      key: 'startedAt',
      term: 'Started',
      value: run.startedAt === null ? UNKNOWN : formatDateTime(run.startedAt),
      ...(run.startedAt === null ? {} : { title: formatUtc(run.startedAt) }),
    },
  ];
}
