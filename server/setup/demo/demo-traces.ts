import { seededGaussian, seededRandom } from '../../../shared/lib/seeded-random.ts';

/** A temperature through straight pieces, as a thermocouple with lag and noise shows it. */
export interface DemoTrace {
  /** Key of a recording of the run it belongs to. */
  recording: string;
  name: string;
  fileName: string;
  seed: number;
  rateHz: number;
  /** Time constant of the thermocouple. */
  lagS: number;
  noiseK: number;
  /** Run time in seconds and temperature in °C; a jump is two knots close to each other. */
  knots: readonly (readonly [timeS: number, temperatureC: number])[];
}

/** Times of nucleation and growth are those of the invented sounds of the same runs. */
export const demoTraces: DemoTrace[] = [
  {
    recording: 'stage-dendritic-a',
    name: 'Thermocouple under the droplet',
    fileName: 'coldstage_run-17_thermocouple.csv',
    seed: 5201,
    rateHz: 10,
    lagS: 0.15,
    noiseK: 0.03,
    knots: [
      [-320, 4.05],
      [9.1, -12.4],
      [9.16, -0.05],
      [26, -0.1],
      [45, -9],
    ],
  },
  {
    recording: 'stage-dendritic-b',
    name: 'Thermocouple under the droplet',
    fileName: 'coldstage_run-18_thermocouple.csv',
    seed: 5202,
    rateHz: 10,
    lagS: 0.15,
    noiseK: 0.03,
    knots: [
      [-200, 4.15],
      [5, -6.1],
      [5.05, -0.05],
      [20, -0.1],
      [38, -6],
    ],
  },
  {
    recording: 'flask-slow-cooling',
    name: 'Thermometer in the flask',
    fileName: 'flask-04_thermometer.csv',
    seed: 5203,
    rateHz: 1,
    lagS: 1.2,
    noiseK: 0.02,
    knots: [
      [-2400, 0.35],
      [18, -4.5],
      [18.5, -0.05],
      [52, -0.1],
      [240, -0.6],
    ],
  },
  {
    recording: 'casting-a',
    name: 'Thermocouple in the middle of the plate',
    fileName: 'AlSi7_plate_03_middle.csv',
    seed: 5204,
    rateHz: 100,
    lagS: 0.05,
    noiseK: 0.3,
    knots: [
      [-4, 672],
      [3, 609],
      [3.4, 613.5],
      [8, 577],
      [11.5, 575.5],
      [22, 520],
    ],
  },
];

const stepsPerSample = 20;

/** Seconds since the first row and °C. */
export function demoTemperatures({ seed, rateHz, lagS, noiseK, knots }: DemoTrace): [number, number][] {
  const noise = seededGaussian(seededRandom(seed));
  const startS = knots[0]![0];
  const count = Math.floor((knots.at(-1)![0] - startS) * rateHz) + 1;
  const share = 1 - Math.exp(-1 / (stepsPerSample * rateHz * lagS));
  let shownC = knots[0]![1];
  return Array.from({ length: count }, (_, row) => {
    for (let n = 1; n <= stepsPerSample; n++) {
      const timeS = startS + (row - 1 + n / stepsPerSample) / rateHz;
      shownC += share * (atKnots(knots, timeS) - shownC);
    }
    return [row / rateHz, shownC + noiseK * noise()];
  });
}

function atKnots(knots: DemoTrace['knots'], timeS: number): number {
  const next = knots.findIndex(([knotS]) => knotS > timeS);
  if (next <= 0) return (next === 0 ? knots[0] : knots.at(-1))![1];
  const [fromS, fromC] = knots[next - 1]!;
  const [toS, toC] = knots[next]!;
  return fromC + ((toC - fromC) * (timeS - fromS)) / (toS - fromS);
}

export function demoTraceCsv(trace: DemoTrace): string {
  const decimals = trace.rateHz > 10 ? 2 : 1;
  const rows = demoTemperatures(trace).map(
    ([timeS, valueC]) => `${timeS.toFixed(decimals)},${valueC.toFixed(2)}`,
  );
  return ['time (s),temperature (°C)', ...rows, ''].join('\n');
}
