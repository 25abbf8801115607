import { rm } from 'node:fs/promises';
import path from 'node:path';
import { saveRunSchema, type Run } from '../../../shared/contract/runs.ts';
import { saveSensorSchema, saveSetupSchema } from '../../../shared/contract/sensors.ts';
import type { Deps } from '../../deps.ts';
import { demoRecordings } from '../demo-audio/demo-recordings.ts';
import { writeDemoRecording } from '../demo-audio/write-demo-recording.ts';
import { demoRuns, type DemoRun } from './demo-runs.ts';
import { demoSetups, type DemoSetupKey } from './demo-setups.ts';
import type { DemoActors } from './seed-people.ts';
import type { DemoLab } from './demo-people.ts';

/** Id of each recording by its key. */
export type DemoRecordingIds = ReadonlyMap<string, string>;

/** Writes the audio of each run and brings it in as a contributor would; measuring goes on beside it. */
export async function seedRecordings(deps: Deps, people: DemoActors): Promise<DemoRecordingIds> {
  const setupIds = seedSetups(deps, people);
  const ids = new Map<string, string>();
  for (const demoRun of demoRuns) {
    const run = seedRun(deps, people, demoRun);
    for (const key of demoRun.recordings)
      ids.set(key, await bringIn(deps, people, { demoRun, run, key, setupIds }));
  }
  return ids;
}

const pauseS = 5;

function contributorOf(people: DemoActors, lab: DemoLab) {
  return people.actor(lab === 'northlight' ? 'contributor' : 'contributor2');
}

function seedSetups({ services }: Deps, people: DemoActors): Map<DemoSetupKey, string> {
  const keys = Object.keys(demoSetups) as DemoSetupKey[];
  return new Map(
    keys.map((key) => {
      const { lab, sensor, setup } = demoSetups[key];
      const actor = contributorOf(people, lab);
      const facts = saveSensorSchema.parse({ ...sensor, labId: people.labIds[lab] });
      const { id: sensorId } = services.sensors.createSensor(actor, facts);
      return [key, services.sensors.createSetup(actor, saveSetupSchema.parse({ ...setup, sensorId })).id];
    }),
  );
}

function seedRun({ services }: Deps, people: DemoActors, { lab, run }: DemoRun): Run {
  return services.runs.create(
    contributorOf(people, lab),
    saveRunSchema.parse({ ...run, labId: people.labIds[lab] }),
  );
}

/** Recordings of one run follow each other, with a pause of some seconds. */
export function demoOffsetNs({ recordings }: DemoRun, key: string): number {
  const before = recordings.slice(0, recordings.indexOf(key));
  const secondsOf = (one: string) => demoRecordings.find((spec) => spec.key === one)?.seconds ?? 0;
  return before.reduce((sum, one) => sum + (secondsOf(one) + pauseS) * 1e9, 0);
}

interface Incoming {
  demoRun: DemoRun;
  run: Run;
  key: string;
  setupIds: Map<DemoSetupKey, string>;
}

async function bringIn(
  deps: Deps,
  people: DemoActors,
  { demoRun, run, key, setupIds }: Incoming,
): Promise<string> {
  const spec = demoRecordings.find((recording) => recording.key === key);
  if (!spec) throw new Error(`The demo has no recording ${key}.`);
  const filePath = path.join(deps.config.paths.uploads, `demo-${key}.wav`);
  const { sizeBytes } = await writeDemoRecording(spec, filePath);
  const declaration = {
    setupId: setupIds.get(demoRun.setup) ?? '',
    licence: demoRun.licence ?? 'CC-BY-4.0',
    sensitivity: demoRun.sensitivity ?? [],
    note: spec.about,
    runOffsetNs: demoOffsetNs(demoRun, key),
    timeExpansion: 1,
  } as const;
  try {
    const bytes = { path: filePath, fileName: spec.fileName, sizeBytes };
    const owner = {
      run: { id: run.id, labId: run.labId },
      uploadedById: contributorOf(people, demoRun.lab).id,
    };
    return await deps.services.intake.bringIn({ ...declaration, ...bytes, ...owner }, () => undefined);
  } finally {
    await rm(filePath, { force: true });
  }
}
