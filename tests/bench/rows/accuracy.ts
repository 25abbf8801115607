import { readFileSync } from 'node:fs';
import { basename, join } from 'node:path';
import { compareViews, readViewValues, type ViewValues } from '../../support/view-accuracy.ts';
import type { BenchRow, RowFamily } from '../kit/bench.ts';
import { short } from '../kit/figures.ts';
import { runMeasure } from '../kit/measurements.ts';
import { requirePeer, runPeer } from '../kit/peer.ts';
import { ultrasonicRecording } from '../kit/recordings.ts';

const MOST_RELATIVE = 1e-5;
const MOST_CODES = 1;
/** Long enough that the engine for long recordings measures it. */
const SEGMENTS = 1.25;

export const accuracy: RowFamily = {
  name: 'accuracy',
  about: 'what is stored against numpy in float64',
  async run(bench) {
    await requirePeer(bench);
    const recording = ultrasonicRecording(bench, SEGMENTS);
    const viewsDir = join(bench.folder, 'accuracy-views');
    await runMeasure(bench, recording, { workers: 2, viewsDir });
    const ours = await readViewValues(join(viewsDir, basename(recording.path)));
    const folder = join(bench.folder, 'oracle');
    await runPeer(bench, 'peer/oracle.py', [recording.path, folder, ours.columns.join(',')]);
    return rowsOf(compareViews(ours, readOracle(folder, ours)));
  },
};

function readOracle(folder: string, { columns }: ViewValues): ViewValues {
  const read = (name: string) => new Uint8Array(readFileSync(join(folder, name)));
  return {
    columns,
    frames: new Float64Array(read('frames.f64').buffer),
    audible: read('audible.u8'),
    ultrasonic: read('ultrasonic.u8'),
    peaks: new Float32Array(read('peaks.f32').buffer),
  };
}

function rowsOf({ medianRelative, codes, differingPeaks }: ReturnType<typeof compareViews>): BenchRow[] {
  const columns = Object.entries(medianRelative).sort((a, b) => b[1] - a[1]);
  const [name, worst] = columns[0]!;
  const mostCodes = Math.max(codes.audible, codes.ultrasonic);
  return [
    {
      what: `features against float64: median relative error of the worst of ${columns.length} (${name})`,
      ours: short(worst),
      must: '1e-5',
      reachable: '5e-7',
      holds: worst <= MOST_RELATIVE,
    },
    {
      what: 'codes of the pictures against float64: greatest difference',
      ours: `audible ${codes.audible}, ultrasonic ${codes.ultrasonic}`,
      must: '1',
      reachable: '1',
      holds: mostCodes <= MOST_CODES,
    },
    {
      what: 'minimum and maximum against float64: pairs that differ',
      ours: String(differingPeaks),
      must: '0',
      reachable: '0',
      holds: differingPeaks === 0,
    },
  ];
}
