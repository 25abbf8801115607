import { mkdirSync, rmSync } from 'node:fs';
import { join } from 'node:path';
import { z } from 'zod';
import type { RowFamily } from '../kit/bench.ts';
import { short, times } from '../kit/figures.ts';
import { askProgram } from '../kit/programs.ts';
import { medianOf, ratiosOf } from '../kit/ratios.ts';

const LEAST = 30;
const MANY = 100_000;
const findingsSchema = z.object({
  togetherPerS: z.number(),
  oneByOnePerS: z.number(),
  inStepsPerS: z.number(),
});

export const database: RowFamily = {
  name: 'database',
  about: 'candidates into a database file: in one transaction against one by one',
  async run(bench) {
    const folder = join(bench.folder, 'database');
    const few = bench.isQuick ? 2000 : 20_000;
    const found: z.output<typeof findingsSchema>[] = [];
    for (let round = 0; round < bench.pairs; round++) {
      rmSync(folder, { recursive: true, force: true });
      mkdirSync(folder);
      const counts = [String(MANY), String(few)];
      found.push(await askProgram(bench, 'candidate-rows', [folder, ...counts], findingsSchema));
    }
    const together = found.map(({ togetherPerS }) => togetherPerS);
    const oneByOne = found.map(({ oneByOnePerS }) => oneByOnePerS);
    const ratio = ratiosOf(together, oneByOne);
    return [
      {
        what: '100,000 candidates in one transaction against one by one, file, synchronous FULL',
        ours: `${short(medianOf(together))} rows/s`,
        peer: `${short(medianOf(oneByOne))} rows/s`,
        ratio: times(ratio),
        must: `${LEAST} x`,
        reachable: '70 x',
        holds: ratio.median >= LEAST,
      },
      {
        what: 'the same as the server does it, 500 in a transaction',
        ours: `${short(medianOf(found.map(({ inStepsPerS }) => inStepsPerS)))} rows/s`,
      },
    ];
  },
};
