import type { Credit, Process, Run, RunKind, SaveRun } from '@shared/contract/runs.ts';

/** What the form holds: texts are never null there, an empty one means unknown. */
export interface RunDraft {
  labId: string;
  title: string;
  kind: RunKind | '';
  material: string;
  composition: string;
  process: Process | '';
  container: string;
  cooling: string;
  coolingRateKPerS: number | null;
  pressurePa: number | null;
  startTemperatureC: number | null;
  supercoolingK: number | null;
  startedAt: string | null;
  specimen: string;
  credits: Credit[];
  notes: string;
}

export function emptyRunDraft(labId: string): RunDraft {
  return {
    labId,
    title: '',
    kind: 'experiment',
    material: '',
    composition: '',
    process: '',
    container: '',
    cooling: '',
    coolingRateKPerS: null,
    pressurePa: null,
    startTemperatureC: null,
    supercoolingK: null,
    startedAt: null,
    specimen: '',
    credits: [],
    notes: '',
  };
}

export function toRunDraft(run: Run): RunDraft {
  const { labId, title, kind, material, process, startedAt } = run;
  const { coolingRateKPerS, pressurePa, startTemperatureC, supercoolingK } = run;
  return {
    ...{ labId, title, kind, material, process, startedAt },
    ...{ coolingRateKPerS, pressurePa, startTemperatureC, supercoolingK },
    composition: run.composition ?? '',
    container: run.container ?? '',
    cooling: run.cooling ?? '',
    specimen: run.specimen ?? '',
    notes: run.notes ?? '',
    credits: run.credits.map((credit) => ({ ...credit })),
  };
}

/** A draft for another run of the same series: what belongs to the one run alone is left to be told. */
export function toNextRunDraft(run: Run): RunDraft {
  return { ...toRunDraft(run), title: '', specimen: '', startedAt: null, notes: '' };
}

const LABELS: readonly (readonly [key: keyof SaveRun, label: string])[] = [
  ['title', 'Title'],
  ['kind', 'Kind'],
  ['material', 'Material'],
  ['composition', 'Composition and purity'],
  ['specimen', 'Specimen'],
  ['process', 'Process'],
  ['container', 'Container or substrate'],
  ['cooling', 'Cooling'],
  ['coolingRateKPerS', 'Cooling rate in K/s'],
  ['pressurePa', 'Pressure in Pa'],
  ['startTemperatureC', 'Temperature at the start in °C'],
  ['supercoolingK', 'Supercooling in K'],
  ['startedAt', 'Started'],
  ['credits', 'Credits'],
  ['notes', 'Notes'],
];

export interface RunDifference {
  label: string;
  mine: string;
  theirs: string;
}

function inWords(value: unknown): string {
  if (value === null || value === '' || value === undefined) return 'unknown';
  if (Array.isArray(value)) return (value as Credit[]).map(({ name }) => name).join(', ') || 'nobody';
  return String(value);
}

/** Where two versions of a run do not say the same. */
export function runDifferences(mine: SaveRun, theirs: SaveRun): RunDifference[] {
  return LABELS.filter(([key]) => JSON.stringify(mine[key]) !== JSON.stringify(theirs[key])).map(
    ([key, label]) => ({ label, mine: inWords(mine[key]), theirs: inWords(theirs[key]) }),
  );
}
