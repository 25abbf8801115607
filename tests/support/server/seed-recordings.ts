import { writeFile } from 'node:fs/promises';
import { randomUUID } from 'node:crypto';
import type { Sensitivity, Sharing } from '../../../shared/contract/recordings.ts';
import { saveRunSchema, type Run } from '../../../shared/contract/runs.ts';
import { saveSensorSchema, saveSetupSchema, type Setup } from '../../../shared/contract/sensors.ts';
import type { Actor } from '../../../shared/policy/actor.ts';
import { labelSchemes, passes } from '../../../server/db/schema/events.ts';
import { createMeasuringService } from '../../../server/features/recordings/measuring.service.ts';
import { updateRecording } from '../../../server/features/recordings/recordings.queries.ts';
import { createViewFolders } from '../../../server/features/recordings/view-folders.ts';
import { measureFile } from '../../../server/measuring/measure-file.ts';
import { dampedSines } from '../wav/signals.ts';
import { writeWav, type WriteWavInput } from '../wav/write-wav.ts';
import type { TestApp } from './test-app.ts';

export type LabSide = 'own' | 'other';

export function labIdOf(app: TestApp, side: LabSide): string {
  return side === 'own' ? app.ownLabId : app.otherLabId;
}

export function contributorOf(app: TestApp, side: LabSide): Actor {
  return app.actor(side === 'own' ? 'contributor' : 'otherContributor');
}

export function runInput(labId: string, title = 'Water droplet, slow cooling') {
  return saveRunSchema.parse({
    labId,
    title,
    kind: 'experiment',
    material: 'water',
    process: 'droplet-freezing',
  });
}

export function seedRun(app: TestApp, side: LabSide = 'own', title?: string): Run {
  return app.deps.services.runs.create(contributorOf(app, side), runInput(labIdOf(app, side), title));
}

export function seedSetup(app: TestApp, side: LabSide = 'own'): Setup {
  const { sensors } = app.deps.services;
  const actor = contributorOf(app, side);
  const facts = {
    labId: labIdOf(app, side),
    name: 'Disc sensor',
    kind: 'contact-ae',
    lowHz: 1000,
    highHz: 90_000,
  };
  const sensor = sensors.createSensor(actor, saveSensorSchema.parse(facts));
  const setup = { sensorId: sensor.id, name: 'Under the cold plate', fullScaleV: 2, preampGainDb: 40 };
  return sensors.createSetup(actor, saveSetupSchema.parse(setup));
}

/** Half a second at 96 kHz with three bursts of 30 kHz in silence. */
export function smallWav(overrides: Partial<WriteWavInput> = {}): Uint8Array<ArrayBuffer> {
  const bursts = [9_600, 24_000, 38_400].map((onsetSample) => ({
    onsetSample,
    amplitude: 0.5,
    frequencyHz: 30_000,
    decayS: 0.0005,
  }));
  return writeWav({ sampleRateHz: 96_000, channels: [dampedSines(48_000, bursts, 96_000)], ...overrides });
}

export interface SeedRecording {
  side?: LabSide;
  sharing?: Sharing;
  sensitivity?: Sensitivity[];
  fileName?: string;
  wav?: Uint8Array;
}

/** Brought in by the lab's contributor; queued, and pending unless told otherwise. */
export async function seedRecording(app: TestApp, seed: SeedRecording = {}): Promise<string> {
  const { side = 'own', sharing, sensitivity = [], fileName = 'run.wav', wav = smallWav() } = seed;
  const run = seedRun(app, side);
  const path = app.deps.services.uploadFolder.pathOf(`form-${randomUUID()}`);
  await writeFile(path, wav);
  const declaration = {
    licence: 'CC-BY-4.0',
    note: '',
    runOffsetNs: null,
    timeExpansion: 1,
    sensitivity,
  } as const;
  const id = await app.deps.services.intake.bringIn(
    {
      ...declaration,
      sensitivity,
      path,
      fileName,
      run,
      sizeBytes: wav.length,
      setupId: seedSetup(app, side).id,
      uploadedById: contributorOf(app, side).id,
    },
    () => undefined,
  );
  await app.deps.services.uploadFolder.remove(path.slice(path.lastIndexOf('form-')));
  if (sharing !== undefined) setSharing(app, id, sharing);
  return id;
}

/** The same, measured without a thread. */
export async function seedMeasured(app: TestApp, seed: SeedRecording = {}): Promise<string> {
  const id = await seedRecording(app, seed);
  await measureHere(app, id);
  if (seed.sharing !== undefined) setSharing(app, id, seed.sharing);
  return id;
}

export function measureHere(app: TestApp, recordingId: string, again = false): Promise<void> {
  const { deps } = app;
  const viewFolders = createViewFolders(deps.config.paths.views);
  const { audit, readStoredAudio } = deps.services;
  const measuring = createMeasuringService({
    ...deps,
    audit,
    readStoredAudio,
    viewFolders,
    measureFile: (input, controls) => measureFile(input, controls),
  });
  const task = {
    again,
    signal: new AbortController().signal,
    onProgress: () => undefined,
    assertHeld: () => undefined,
  };
  return measuring.measure(recordingId, task);
}

export function setSharing(app: TestApp, recordingId: string, sharing: Sharing): void {
  const heldAtMs = sharing === 'held' ? app.clock.nowMs() : null;
  updateRecording(app.deps.db, recordingId, { sharing, heldAtMs });
}

export function seedPass(
  app: TestApp,
  recordingId: string,
  facts: { blind?: boolean; state?: 'assigned' | 'finished' | 'cancelled' } = {},
): string {
  const { db, ids, clock } = app.deps;
  db.insert(labelSchemes)
    .values({ version: 1, classes: [], createdAtMs: clock.nowMs() })
    .onConflictDoNothing()
    .run();
  const id = ids.next();
  const people = { labelerId: app.personIds.labeler, assignedById: app.personIds.curator };
  const { blind = true, state = 'assigned' } = facts;
  const told = { instructions: '', schemeVersion: 1, createdAtMs: clock.nowMs() };
  db.insert(passes)
    .values({ id, recordingId, ...people, blind, state, ...told })
    .run();
  return id;
}
