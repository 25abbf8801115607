import type { z } from 'zod';
import { createEventSchema } from '../../../shared/contract/events.ts';
import { createPassSchema, type Pass } from '../../../shared/contract/passes.ts';
import type { Actor } from '../../../shared/policy/actor.ts';
import type { Deps } from '../../deps.ts';
import { demoRecordings } from '../demo-audio/demo-recordings.ts';
import { seededRandom } from '../../../shared/lib/seeded-random.ts';
import { trueBursts, type TrueBurst } from '../demo-audio/true-bursts.ts';
import type { DemoPersonKey } from './demo-people.ts';
import type { DemoActors } from './seed-people.ts';
import type { DemoRecordingIds } from './seed-recordings.ts';

interface DemoPass {
  recording: string;
  labeler: DemoPersonKey & `labeler${string}`;
  blind: boolean;
  /** Marks that were set so far; the pass is finished where it says so. */
  marks: number;
  finished: boolean;
  /** Share of its part that was seen so far. */
  seenShare?: number;
  order?: Pick<z.input<typeof createPassSchema>, 'task' | 'kind' | 'windows' | 'roundOrder'>;
  dueAt?: string;
  instructions?: string;
}

/** Passes as they stand when the demo opens: finished ones, one of each kind under way, one untouched and blind. */
const demoPasses: DemoPass[] = [
  { recording: 'stage-dendritic-a', labeler: 'labeler', blind: true, marks: 60, finished: true },
  { recording: 'stage-dendritic-b', labeler: 'labeler', blind: true, marks: 30, finished: true },
  { recording: 'stage-planar', labeler: 'labeler2', blind: true, marks: 10, finished: true },
  { recording: 'stage-control', labeler: 'labeler2', blind: true, marks: 0, finished: true },
  { recording: 'casting-a', labeler: 'labeler2', blind: false, marks: 40, finished: true },
  {
    recording: 'flask-float',
    labeler: 'labeler',
    blind: true,
    marks: 0,
    finished: false,
    seenShare: 0.5,
    order: { kind: 'windows', windows: { count: 6, lengthS: 2 } },
    dueAt: '2026-10-30T16:00:00.000Z',
    instructions: 'Six windows stand for the whole. Mark what begins inside them, and nothing outside.',
  },
  {
    recording: 'casting-a',
    labeler: 'labeler',
    blind: false,
    marks: 0,
    finished: false,
    order: { kind: 'rounds', roundOrder: 'strength' },
    instructions: 'The strongest come first. Stop when you hear nothing but the furnace.',
  },
  {
    recording: 'stage-dendritic-a',
    labeler: 'labeler2',
    blind: true,
    marks: 0,
    finished: false,
    order: { task: 'phases' },
    dueAt: '2027-02-15T16:00:00.000Z',
    instructions: 'Tell the phases from the pictures and the temperature. Mark what cannot be seen as such.',
  },
  {
    recording: 'weld',
    labeler: 'labeler',
    blind: false,
    marks: 6,
    finished: false,
    dueAt: '2027-01-15T16:00:00.000Z',
    instructions:
      'Hot cracks come within the first second after the arc has passed. Leave out the arc itself.',
  },
  {
    recording: 'flask-slow-cooling',
    labeler: 'labeler',
    blind: true,
    marks: 0,
    finished: false,
    dueAt: '2027-01-31T16:00:00.000Z',
    instructions: 'Tell bubbles from cracks where you can; "unsure" is a good answer.',
  },
];

export async function seedMarks(
  deps: Deps,
  people: DemoActors,
  recordingIds: DemoRecordingIds,
): Promise<void> {
  for (const demoPass of demoPasses) await seedPass(deps, people, recordingIds, demoPass);
}

async function seedPass(
  { services }: Deps,
  people: DemoActors,
  recordingIds: DemoRecordingIds,
  demoPass: DemoPass,
): Promise<void> {
  const recordingId = recordingIds.get(demoPass.recording) ?? '';
  const labeler = people.actor(demoPass.labeler);
  const { blind, dueAt, instructions, order, seenShare = demoPass.finished ? 1 : 0 } = demoPass;
  const told = { recordingId, labelerId: labeler.id, blind, dueAt, instructions, ...order };
  const pass = services.passes.create(people.actor('curator'), createPassSchema.parse(told));
  for (const mark of marksOf(demoPass)) {
    await services.events.create(labeler, recordingId, createEventSchema.parse({ ...mark, passId: pass.id }));
  }
  seeSome(services, labeler, pass, seenShare);
  if (demoPass.finished) services.passes.finish(labeler, pass.id, '');
}

/** The first of its windows, or the beginning of the recording, in all of its channels. */
function seeSome(
  { coverage, recordings }: Deps['services'],
  labeler: Actor,
  pass: Pass,
  share: number,
): void {
  if (share === 0) return;
  const { frames, channels, sampleRateHz } = recordings.get(labeler, pass.recordingId).format;
  const windows = pass.windows ?? [{ startSample: 0, endSample: Math.ceil(frames * share) }];
  const seen = pass.windows ? windows.slice(0, Math.ceil(windows.length * share)) : windows;
  const spans = Array.from({ length: channels }, (_, channel) =>
    seen.map(({ startSample, endSample }) => ({
      ...{ way: 'seen' as const, channel, startSample, endSample },
      detail: sampleRateHz / 200,
    })),
  );
  coverage.add(labeler, pass.id, { spans: spans.flat() });
}

/** Marks near the bursts that are in the file, with the small errors of a person. */
function marksOf({ recording, marks }: DemoPass) {
  const spec = demoRecordings.find((candidate) => candidate.key === recording);
  if (!spec) throw new Error(`The demo has no recording ${recording}.`);
  const random = seededRandom(spec.seed + 1);
  const frames = spec.seconds * spec.sampleRateHz;
  return trueBursts(spec)
    .slice(0, marks)
    .map((burst) => toMark(burst, frames, random));
}

function toMark(burst: TrueBurst, frames: number, random: () => number) {
  const shift = Math.round((random() - 0.6) * 8);
  const startSample = Math.max(0, burst.onsetSample + shift);
  return {
    channel: burst.channel,
    startSample,
    endSample: Math.min(frames, Math.max(startSample + 16, burst.endSample)),
    classKey: burst.kind,
    confidence: random() < 0.75 ? 'sure' : random() < 0.7 ? 'probable' : 'unsure',
    note: '',
  };
}
