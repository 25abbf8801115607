import { createPhaseSchema, type GrowthPhaseKind, type PhaseBasis } from '../../../shared/contract/phases.ts';
import type { Deps } from '../../deps.ts';
import type { DemoPhase, DemoRecordingSpec, PhaseName } from '../demo-audio/demo-recording-spec.ts';
import { demoRecordings } from '../demo-audio/demo-recordings.ts';
import { seededRandom } from '../../../shared/lib/seeded-random.ts';
import { demoRuns, type DemoRun } from './demo-runs.ts';
import type { DemoActors } from './seed-people.ts';
import { demoOffsetNs, type DemoRecordingIds } from './seed-recordings.ts';

/** What a person sees in a film lies within a frame or two. */
const mostSlipS = 0.06;

/** Growth phases as the lab of each run told them: those from which the sound was made, with the slips of a person. */
export function seedPhases(deps: Deps, people: DemoActors, recordingIds: DemoRecordingIds): void {
  for (const demoRun of demoRuns)
    for (const key of demoRun.recordings) tellPhases(deps, people, { demoRun, key, recordingIds });
}

interface Told {
  demoRun: DemoRun;
  key: string;
  recordingIds: DemoRecordingIds;
}

function tellPhases({ services }: Deps, people: DemoActors, { demoRun, key, recordingIds }: Told): void {
  const spec = demoRecordings.find((recording) => recording.key === key);
  if (!spec) throw new Error(`The demo has no recording ${key}.`);
  const contributor = people.actor(demoRun.lab === 'northlight' ? 'contributor' : 'contributor2');
  const { runId } = services.recordings.get(contributor, recordingIds.get(key) ?? '');
  const edgesNs = edgesOf(spec, demoOffsetNs(demoRun, key));
  spec.phases.forEach((phase, index) => {
    const [startNs, endNs] = [edgesNs[index] ?? 0, edgesNs[index + 1] ?? 0];
    const told = { phase: kindOf(phase.name), startNs, endNs, ...tellingOf(demoRun, phase) };
    services.phases.create(contributor, runId, createPhaseSchema.parse(told));
  });
}

/** One edge between two phases, to the millisecond; the outer ones are those of the recording. */
function edgesOf({ phases, seconds, seed }: DemoRecordingSpec, offsetNs: number): number[] {
  const random = seededRandom(seed + 2);
  const slipS = () => (random() - 0.5) * 2 * mostSlipS;
  const inner = phases.slice(1).map(({ startSeconds }) => startSeconds + slipS());
  return [0, ...inner, seconds].map((edgeS) => offsetNs + Math.round(edgeS * 1000) * 1e6);
}

function kindOf(name: PhaseName): GrowthPhaseKind {
  return name === 'cooling-solid' ? 'solid-cooling' : name;
}

function tellingOf({ run }: DemoRun, { name }: DemoPhase): { basis: PhaseBasis; confidence: string } {
  const hasCamera = run.process === 'droplet-freezing' || run.process === 'directional-solidification';
  if (name === 'recalescence' || name === 'cooling-solid')
    return { basis: 'temperature', confidence: 'sure' };
  return hasCamera ? { basis: 'camera', confidence: 'sure' } : { basis: 'inferred', confidence: 'probable' };
}
