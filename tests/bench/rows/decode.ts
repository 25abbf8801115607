import { z } from 'zod';
import type { RowFamily } from '../kit/bench.ts';
import { short, times } from '../kit/figures.ts';
import { askProgram } from '../kit/programs.ts';
import { medianOf, ratiosOf } from '../kit/ratios.ts';

const LEAST = 4;
const findingsSchema = z.object({ engineNs: z.array(z.number()), wavDecoderNs: z.array(z.number()) });

export const decode: RowFamily = {
  name: 'decode',
  about: 'decoding against wav-decoder',
  async run(bench) {
    const { engineNs, wavDecoderNs } = await askProgram(
      bench,
      'decode-speed',
      [String(bench.pairs)],
      findingsSchema,
    );
    const ratio = ratiosOf(wavDecoderNs, engineNs);
    return [
      {
        what: 'decoding 24 bits against wav-decoder, CPU per sample',
        ours: `${short(medianOf(engineNs))} ns`,
        peer: `${short(medianOf(wavDecoderNs))} ns`,
        ratio: times(ratio),
        must: `${LEAST} x`,
        reachable: '30 x',
        holds: ratio.median >= LEAST,
      },
    ];
  },
};
