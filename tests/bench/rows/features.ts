import { join } from 'node:path';
import { ViewLayout } from '../../../server/measuring/view-layout.ts';
import type { Bench, BenchRow, RowFamily } from '../kit/bench.ts';
import { seconds, short, times } from '../kit/figures.ts';
import { runMeasure, runPlainMeasure } from '../kit/measurements.ts';
import { requirePeer, runPeer } from '../kit/peer.ts';
import { alternate, medianOf, ratiosOf } from '../kit/ratios.ts';
import { mainRecording, type MadeRecording } from '../kit/recordings.ts';
import type { ProgramResult } from '../kit/programs.ts';

export const features: RowFamily = {
  name: 'features',
  about: 'features, pictures and min-max of 192 kHz 24-bit against numpy',
  async run(bench) {
    await requirePeer(bench);
    const recording = mainRecording(bench);
    const runs = await alternate(bench.pairs, {
      peer: () => runFeaturesPeer(bench, recording),
      two: () => runPlainMeasure(bench, recording, { workers: 2 }),
      one: () => runPlainMeasure(bench, recording, { workers: 1 }),
      packaged: () => runPlainMeasure(bench, recording, { workers: 1, engine: 'package' }),
    });
    const wall = (results: ProgramResult[]) => results.map(({ wallS }) => wallS);
    const cpu = (results: ProgramResult[]) => results.map(({ cpuS }) => cpuS);
    const byTwo = ratiosOf(wall(runs.peer), wall(runs.two));
    const byOne = ratiosOf(cpu(runs.peer), cpu(runs.one));
    const byPackage = ratiosOf(cpu(runs.peer), cpu(runs.packaged));
    return [
      {
        what: 'features, pictures, min-max: two workers, wall',
        ours: seconds(wall(runs.two)),
        peer: seconds(wall(runs.peer)),
        ratio: times(byTwo),
        must: '3 x',
        reachable: '7.4 x',
        holds: byTwo.median >= 3,
      },
      {
        what: 'the same: one worker, CPU',
        ours: seconds(cpu(runs.one)),
        peer: seconds(cpu(runs.peer)),
        ratio: times(byOne),
        must: '2 x',
        reachable: '4.2 x',
        holds: byOne.median >= 2,
      },
      {
        what: 'the same without the own kernel: one worker, CPU',
        ours: seconds(cpu(runs.packaged)),
        peer: seconds(cpu(runs.peer)),
        ratio: times(byPackage),
        must: '0.8 x',
        reachable: '1.03 x',
        holds: byPackage.median >= 0.8,
      },
      perSample(recording, cpu(runs.one), cpu(runs.peer)),
      await withTunedPeer(bench, recording, cpu(runs.one)),
      await wholeMeasurement(bench, recording, medianOf(wall(runs.peer))),
    ];
  },
};

/** The peer writes the columns that our table of frames has, no more. */
function runFeaturesPeer(
  bench: Bench,
  recording: MadeRecording,
  options?: { keepsPages: boolean },
): Promise<ProgramResult> {
  const { frameColumns } = new ViewLayout(recording);
  const folder = join(bench.folder, 'peer-features');
  return runPeer(bench, 'peer/features.py', [recording.path, folder, frameColumns.join(',')], options);
}

/** What a lab could still get out of the script without touching it; no figure has to hold against that. */
async function withTunedPeer(bench: Bench, recording: MadeRecording, ourCpuS: number[]): Promise<BenchRow> {
  const peer = await runFeaturesPeer(bench, recording, { keepsPages: true });
  return {
    what: 'the same: one worker, CPU, against the peer with an allocator that keeps its pages',
    ours: seconds(ourCpuS),
    peer: seconds([peer.cpuS]),
    ratio: times(ratiosOf([peer.cpuS], [medianOf(ourCpuS)])),
  };
}

function perSample({ frames }: MadeRecording, ours: number[], peer: number[]): BenchRow {
  const of = (values: number[]) => `${short((medianOf(values) / frames) * 1e9)} ns`;
  return { what: 'the same: CPU per sample, start included', ours: of(ours), peer: of(peer) };
}

async function wholeMeasurement(
  bench: Bench,
  recording: MadeRecording,
  peerWallS: number,
): Promise<BenchRow> {
  const { wallS, cpuS } = await runMeasure(bench, recording, { workers: 2 });
  return {
    what: 'npm run measure, candidates included: two workers, wall',
    ours: `${short(wallS)} s (CPU ${short(cpuS)} s)`,
    peer: `${short(peerWallS)} s without candidates`,
    ratio: `${short(recording.frames / wallS / 1e6)} Msamples/s`,
  };
}
