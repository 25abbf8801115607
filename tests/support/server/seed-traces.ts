import { writeFile } from 'node:fs/promises';
import { createTraceSchema, type Trace } from '../../../shared/contract/traces.ts';
import { contributorOf, type LabSide } from './seed-recordings.ts';
import type { TestApp } from './test-app.ts';

export const plainMapping = {
  separator: 'comma',
  decimal: 'point',
  timeColumn: 0,
  timeUnit: 's',
  valueColumn: 1,
  unit: '°C',
} as const;

export function traceInput(facts: object = {}) {
  return { name: 'Thermocouple', quantity: 'temperature', mapping: plainMapping, ...facts };
}

export interface SeedTrace {
  side?: LabSide;
  csv?: string;
  facts?: object;
}

/** Brought in by the contributor of the lab of the run. */
export async function seedTrace(app: TestApp, runId: string, seed: SeedTrace = {}): Promise<Trace> {
  const { side = 'own', csv = 'time (s),T (°C)\n0,1\n1,0\n2,-1\n3,-2\n', facts = {} } = seed;
  const { traces } = app.deps.services;
  const actor = contributorOf(app, side);
  const { name, path } = await traces.admit(actor, runId, csv.length);
  try {
    await writeFile(path, csv);
    const trace = createTraceSchema.parse(traceInput(facts));
    return await traces.create(actor, runId, { path, fileName: 'stage.csv', sizeBytes: csv.length, trace });
  } finally {
    await traces.removeFile(name);
  }
}
