import { z } from 'zod';
import type { RowFamily } from '../kit/bench.ts';
import { short, times } from '../kit/figures.ts';
import { askProgram } from '../kit/programs.ts';
import { medianOf, ratiosOf } from '../kit/ratios.ts';

const LEAST = 20;
const findingsSchema = z.object({ meydaUs: z.array(z.number()), engineUs: z.array(z.number()) });

export const meyda: RowFamily = {
  name: 'meyda',
  about: 'features of a frame against Meyda.extract',
  async run(bench) {
    const { meydaUs, engineUs } = await askProgram(
      bench,
      'meyda-speed',
      [String(bench.pairs)],
      findingsSchema,
    );
    const ratio = ratiosOf(meydaUs, engineUs);
    return [
      {
        what: 'features of a frame of 2048 against Meyda.extract with all of them, CPU',
        ours: `${short(medianOf(engineUs))} us`,
        peer: `${short(medianOf(meydaUs))} us`,
        ratio: times(ratio),
        must: `${LEAST} x`,
        reachable: '50 x',
        holds: ratio.median >= LEAST,
      },
    ];
  },
};
