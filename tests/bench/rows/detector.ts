import type { BenchRow, RowFamily } from '../kit/bench.ts';
import { linesOf, numberAfter } from '../kit/printed-lines.ts';

/** What must be found from which SNR up, peak of a click over the noise within half an octave. */
const LIMITS = [
  { fromDb: 15, recall: 0.98, precision: 0.98, onsetUs: (rateKhz: number) => (rateKhz >= 500 ? 20 : 50) },
  { fromDb: 10, recall: 0.9, precision: 0.9, onsetUs: () => 100 },
  { fromDb: 5, recall: 0.5, precision: 0.9, onsetUs: () => Infinity },
] as const;
const OVERLAPPING_RECALL = 0.9;
const FALSE_IN_600_S = 2;

export const detector: RowFamily = {
  name: 'detector',
  about: 'how well clicks of known onset are found',
  async run(bench) {
    return (await linesOf(bench, 'detector-accuracy.ts', bench.isQuick ? ['--quick'] : [])).map(detectorRow);
  },
};

export function detectorRow(line: string): BenchRow {
  const found = {
    recall: numberAfter(line, /recall ([\d.]+)/),
    precision: numberAfter(line, /precision ([\d.]+)/),
    onsetUs: numberAfter(line, /onset ([\d.]+)/),
  };
  const [what = line] = line.split(/\s+n\s+\d+\s|\s+\d+ candidates/);
  const ours = line.slice(what.length).trim().replaceAll(/\s+/g, ' ');
  if (line.includes('noise alone')) return falseRow(what, ours, line);
  if (line.includes('two clicks')) {
    const must = `recall ${OVERLAPPING_RECALL}`;
    return { what, ours, must, holds: found.recall >= OVERLAPPING_RECALL };
  }
  const leastDb = numberAfter(line, /, ([\d.]+)-[\d.]+ dB/);
  const limit = LIMITS.find(({ fromDb }) => leastDb >= fromDb);
  if (!limit) return { what, ours };
  const mostUs = limit.onsetUs(numberAfter(line, /^([\d.]+) kHz/));
  const onset = Number.isFinite(mostUs) ? `, ${mostUs} us` : '';
  return {
    what,
    ours,
    must: `recall ${limit.recall}, precision ${limit.precision}${onset}`,
    holds: found.recall >= limit.recall && found.precision >= limit.precision && !(found.onsetUs > mostUs),
  };
}

/** At least one is allowed in a shorter stretch: chance is no rate. */
function falseRow(what: string, ours: string, line: string): BenchRow {
  const count = numberAfter(line, /(\d+) candidates/);
  const allowed = Math.max(1, (FALSE_IN_600_S * numberAfter(line, /in ([\d.]+) s/)) / 600);
  return { what, ours, must: `${FALSE_IN_600_S} in 600 s`, holds: count <= allowed };
}
