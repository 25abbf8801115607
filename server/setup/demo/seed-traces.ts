import { writeFile } from 'node:fs/promises';
import { createTraceSchema } from '../../../shared/contract/traces.ts';
import type { Deps } from '../../deps.ts';
import { demoRuns } from './demo-runs.ts';
import { demoTraceCsv, demoTraces, type DemoTrace } from './demo-traces.ts';
import type { DemoActors } from './seed-people.ts';
import type { DemoRecordingIds } from './seed-recordings.ts';

/** Brings the invented temperatures in as a contributor of the run's lab would. */
export async function seedTraces(
  deps: Deps,
  people: DemoActors,
  recordingIds: DemoRecordingIds,
): Promise<void> {
  for (const trace of demoTraces)
    await seedTrace(deps, people, recordingIds.get(trace.recording) ?? '', trace);
}

async function seedTrace(
  { services }: Deps,
  people: DemoActors,
  recordingId: string,
  trace: DemoTrace,
): Promise<void> {
  const lab = demoRuns.find((run) => run.recordings.includes(trace.recording))?.lab;
  const actor = people.actor(lab === 'brineworks' ? 'contributor2' : 'contributor');
  const { runId } = services.recordings.get(actor, recordingId);
  const bytes = Buffer.from(demoTraceCsv(trace));
  const { name, path } = await services.traces.admit(actor, runId, bytes.length);
  try {
    await writeFile(path, bytes);
    const facts = { path, fileName: trace.fileName, sizeBytes: bytes.length, trace: toldWith(trace) };
    await services.traces.create(actor, runId, facts);
  } finally {
    await services.traces.removeFile(name);
  }
}

function toldWith({ name, knots }: DemoTrace) {
  return createTraceSchema.parse({
    name,
    quantity: 'temperature',
    mapping: {
      separator: 'comma',
      decimal: 'point',
      timeColumn: 0,
      timeUnit: 's',
      valueColumn: 1,
      unit: '°C',
    },
    runOffsetNs: knots[0]![0] * 1e9,
  });
}
