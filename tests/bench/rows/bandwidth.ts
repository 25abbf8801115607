import { MissingHereError, type BenchRow, type RowFamily } from '../kit/bench.ts';
import { linesOf, numberAfter } from '../kit/printed-lines.ts';

const MOST_ERROR_HZ = 1000;

export const bandwidth: RowFamily = {
  name: 'bandwidth',
  about: 'where the bandwidth of files ends that were compressed or converted',
  async run(bench) {
    const lines = await linesOf(bench, 'bandwidth-accuracy.ts');
    const missing = lines.find((line) => line.startsWith('Nothing was measured'));
    if (missing !== undefined) throw new MissingHereError(missing);
    return lines.map(bandwidthRow);
  },
};

export function bandwidthRow(line: string): BenchRow {
  const [what = line, ...found] = line.trim().split(/\s+(?=found )/);
  const errorHz = Math.abs(numberAfter(line, /error\s+(-?[\d.]+) Hz/));
  return {
    what: `effective bandwidth: ${what}`,
    ours: found.join(' ').replaceAll(/\s+/g, ' '),
    must: `${MOST_ERROR_HZ} Hz`,
    holds: errorHz <= MOST_ERROR_HZ,
  };
}
