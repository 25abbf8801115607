import { seededGaussian, seededRandom } from '../../../shared/lib/seeded-random.ts';

export interface TemperatureTruth {
  rateHz?: number;
  startC?: number;
  coolingKPerS?: number;
  meltingC?: number;
  supercoolingK?: number;
  plateauS?: number;
  /** Time constant of a sensor that follows with a lag of first order. */
  lagS?: number;
  noiseK?: number;
  seed?: number;
}

/** A sample that cools, jumps back to its melting point at once, stays there and cools on, as a sensor with lag shows it. */
export function freezingTrace(truth: TemperatureTruth = {}) {
  const { rateHz = 50, startC = 4, coolingKPerS = 0.5, meltingC = 0, supercoolingK = 8 } = truth;
  const { plateauS = 8, lagS = 0.1, noiseK = 0.02, seed = 1 } = truth;
  const onsetS = (startC - meltingC + supercoolingK) / coolingKPerS;
  const endS = onsetS + plateauS;
  const noise = seededGaussian(seededRandom(seed));
  const count = Math.round((endS + 10) * rateHz);
  const timesS = Float64Array.from({ length: count }, (_, n) => n / rateHz);
  const sampleC = (timeS: number) => {
    if (timeS < onsetS) return startC - coolingKPerS * timeS;
    return timeS < endS ? meltingC : meltingC - coolingKPerS * (timeS - endS);
  };
  let shown = startC;
  const inner = 20;
  const values = timesS.map((timeS) => {
    for (let n = 0; n < inner; n++) {
      const at = timeS - (inner - 1 - n) / inner / rateHz;
      shown = lagS > 0 ? shown + ((sampleC(at) - shown) / lagS) * (1 / inner / rateHz) : sampleC(at);
    }
    return shown + noiseK * noise();
  });
  return { trace: { timesS, values }, onsetS, nucleationC: meltingC - supercoolingK };
}
