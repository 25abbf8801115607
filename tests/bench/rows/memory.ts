import { megabytes } from '../kit/figures.ts';
import type { BenchRow, RowFamily } from '../kit/bench.ts';
import { runMeasure } from '../kit/measurements.ts';
import { mainRecording } from '../kit/recordings.ts';

const MOST_MB = 150;

export const memory: RowFamily = {
  name: 'memory',
  about: 'highest memory of npm run measure',
  async run(bench) {
    const recording = mainRecording(bench);
    const rows: BenchRow[] = [];
    for (const workers of [1, 2]) {
      const { peakMb } = await runMeasure(bench, recording, { workers });
      rows.push({
        what: `npm run measure, ${workers === 1 ? 'one worker' : 'two workers'}: highest memory`,
        ours: megabytes(peakMb),
        must: megabytes(MOST_MB),
        reachable: '74 MB',
        holds: peakMb <= MOST_MB,
      });
    }
    return rows;
  },
};
