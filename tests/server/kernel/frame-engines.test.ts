import Meyda from 'meyda';
import { describe, expect, it } from 'vitest';
import { kernelEngine } from '../../../server/kernel/kernel-engine.ts';
import { emptyDescriptors, meydaDescriptors } from '../../../server/signal/descriptors.ts';
import { FEATURE, type FrameEngine } from '../../../server/signal/frame-engine.ts';
import { FrameSpectrum } from '../../../server/signal/frame-spectrum.ts';
import { hannWindow } from '../../../server/signal/hann.ts';
import { packageEngine } from '../../../server/signal/package-engine.ts';
import { whiteNoiseSignal } from '../../support/wav/signals.ts';
import {
  analyseLong,
  featuresOf,
  frameCases,
  greatestAmplitudeError,
  gridOf,
  KEPT_BIN,
  makeSignal,
  median,
  powerOf,
  type FrameCase,
} from './frame-cases.ts';

const engines: [string, () => FrameEngine][] = [
  ['kernel', kernelEngine],
  ['package', packageEngine],
];
const isStress = ({ signal }: FrameCase) => signal === 'tone' || signal === 'offset';
const named = frameCases.map((one): [string, FrameCase] => [`${one.signal}, N = ${one.size}`, one]);
const calm = named.filter(([, one]) => !isStress(one));

/** Rounding of a float32 transform, relative to what the whole frame carries. */
const AMPLITUDE_ERROR = 1e-12;

function analyseCase(engine: FrameEngine, { signal, frames, sampleRateHz, size }: FrameCase) {
  return analyseLong(engine, { samples: makeSignal(signal, frames), sampleRateHz, size });
}

describe.each(engines)('the %s engine against numpy in float64', (_name, makeEngine) => {
  it.each(named)('powers of %s differ by less than 1e-12 of the energy of the frame', (_case, one) => {
    const { rows, count } = analyseCase(makeEngine(), one);
    for (let row = 0; row < count; row++) {
      const kept = powerOf(rows, row).filter((_, bin) => bin % KEPT_BIN === 0);
      expect(kept).toHaveLength(one.powers[row]!.length);
      expect(greatestAmplitudeError(kept, one.powers[row]!)).toBeLessThan(
        AMPLITUDE_ERROR * one.totalPowers[row]!,
      );
    }
  });

  it.each(calm)('features of %s differ by a median of less than 1e-6, of one column 1e-5', (_case, one) => {
    const { rows, count, columns } = analyseCase(makeEngine(), one);
    const errorsOf = (column: number) =>
      Array.from({ length: count }, (_, row) =>
        Math.abs(featuresOf(rows, row, columns)[column]! / one.features[row]![column]! - 1),
      );
    const errors = Array.from({ length: columns }, (_, column) => errorsOf(column));
    expect(median(errors.flat())).toBeLessThan(1e-6);
    for (const [column, ofColumn] of errors.slice(0, FEATURE.thirdOctaves).entries()) {
      expect(median(ofColumn), `column ${column}`).toBeLessThan(1e-5);
    }
  });

  it.each(named)('changes of sign of %s are counted exactly', (_case, one) => {
    const { rows, count, columns } = analyseCase(makeEngine(), one);
    const found = Array.from(
      { length: count },
      (_, row) => featuresOf(rows, row, columns)[FEATURE.crossings],
    );
    expect(found).toEqual(one.features.map((row) => row[FEATURE.crossings]));
  });

  it.each(named)('levels of %s hold to 1e-12 of the energy of the frame', (_case, one) => {
    const { rows, count, columns } = analyseCase(makeEngine(), one);
    for (let row = 0; row < count; row++) {
      const found = featuresOf(rows, row, columns);
      const wanted = one.features[row]!;
      expect(found[FEATURE.meanSquare]! / wanted[FEATURE.meanSquare]!).toBeCloseTo(1, 5);
      expect(found[FEATURE.mean]! / wanted[FEATURE.mean]!).toBeCloseTo(1, 4);
      const limit = AMPLITUDE_ERROR * one.totalPowers[row]!;
      expect(greatestAmplitudeError(levelsOf(found), levelsOf(wanted))).toBeLessThan(limit);
    }
  });
});

/** Mean squares above the hearing line, in all, and in every third octave. */
function levelsOf(features: number[]): number[] {
  return [
    ...features.slice(FEATURE.ultrasonicMeanSquare, FEATURE.cepstral),
    ...features.slice(FEATURE.thirdOctaves),
  ];
}

/** Whole path of meyda on a frame that is windowed already, its bank renewed: it keeps it when rate or size change. */
function meydaCepstrum(windowed: Float32Array, sampleRateHz: number): number[] {
  Object.assign(Meyda, { sampleRate: sampleRateHz, bufferSize: windowed.length, windowingFunction: 'rect' });
  Meyda.melBands = 20;
  Meyda.extract('mfcc', windowed);
  Meyda.melBands = 26;
  const found = Meyda.extract('mfcc', windowed);
  return found as unknown as number[];
}

describe.each(engines)('the %s engine against meyda', (_name, makeEngine) => {
  const rates: [number, number][] = [
    [8000, 256],
    [48_000, 512],
    [96_000, 1024],
    [192_000, 2048],
    [1_000_000, 8192],
  ];

  it.each(rates)('has its 13 coefficients at %d Hz, N = %d', (sampleRateHz, size) => {
    const samples = whiteNoiseSignal(size * 2, 0.1, size);
    const { rows, columns } = analyseLong(makeEngine(), { samples, sampleRateHz, size });
    const { weights } = hannWindow(size);
    const mean = samples.slice(0, size).reduce((sum, x) => sum + x / size, 0);
    const windowed = weights.map((weight, n) => weight * (samples[n]! - mean));
    const wanted = meydaCepstrum(windowed, sampleRateHz);
    const found = featuresOf(rows, 0, columns).slice(FEATURE.cepstral, FEATURE.thirdOctaves);
    const scale = Math.max(...wanted.map(Math.abs));
    expect(found).toHaveLength(13);
    for (const [c, value] of wanted.entries()) expect(found[c]! / scale).toBeCloseTo(value / scale, 5);
  });

  it.each(rates)('has its centroid, spread, flatness and roll-off at %d Hz, N = %d', (sampleRateHz, size) => {
    const samples = whiteNoiseSignal(size * 2, 0.1, size + 1);
    const { rows, count, columns } = analyseLong(makeEngine(), { samples, sampleRateHz, size });
    const wanted = emptyDescriptors();
    for (let row = 0; row < count; row++) {
      meydaDescriptors(powerOf(rows, row).map(Math.sqrt), sampleRateHz, wanted);
      const found = featuresOf(rows, row, columns);
      expect(found[FEATURE.centroidHz]! / wanted.centroidHz).toBeCloseTo(1, 6);
      expect(found[FEATURE.spreadHz]! / wanted.spreadHz).toBeCloseTo(1, 6);
      expect(found[FEATURE.flatness]! / wanted.flatness).toBeCloseTo(1, 5);
      const bins =
        (found[FEATURE.rolloff99AmplitudeHz]! - wanted.rolloff99AmplitudeHz) / (sampleRateHz / size);
      expect(Math.abs(bins)).toBeLessThan(1.01);
    }
  });
});

describe('both engines', () => {
  it.each([256, 512, 1024, 2048, 4096, 8192, 16_384])('agree on every column at N = %d', (size) => {
    const sampleRateHz = size * 200;
    const samples = whiteNoiseSignal(size * 4 + 77, 0.1, size);
    const kernel = analyseLong(kernelEngine(), { samples, sampleRateHz, size });
    const other = analyseLong(packageEngine(), { samples, sampleRateHz, size });
    for (let row = 0; row < other.count; row++) {
      const found = featuresOf(kernel.rows, row, kernel.columns);
      const wanted = featuresOf(other.rows, row, other.columns);
      expect(found.slice(0, 4)).toEqual(wanted.slice(0, 4));
      const power = powerOf(other.rows, row);
      const total = power.reduce((sum, value) => sum + value, 0);
      expect(greatestAmplitudeError(powerOf(kernel.rows, row), power)).toBeLessThan(AMPLITUDE_ERROR * total);
      const loudest = Math.max(...wanted.slice(FEATURE.cepstral, FEATURE.thirdOctaves).map(Math.abs));
      for (const [column, value] of wanted.entries()) {
        const isCepstral = column >= FEATURE.cepstral && column < FEATURE.thirdOctaves;
        const scale = isCepstral ? loudest : value;
        expect(found[column]! / scale, `column ${column}`).toBeCloseTo(value / scale, 5);
      }
    }
  });

  it('agree on the table of long frames, which has silence as NaN', () => {
    const sampleRateHz = 192_000;
    const samples = whiteNoiseSignal(2048 * 6 + 77, 0.1, 4);
    samples.fill(0, 2048 * 2, 2048 * 4);
    const tableBy = (engine: FrameEngine) => {
      const { rows, count, columns } = analyseLong(engine, { samples, sampleRateHz, size: 2048 });
      const table = rows.table(count, sampleRateHz / 2048);
      return Array.from({ length: count }, (_, row) => [
        ...table.subarray(row * columns, (row + 1) * columns),
      ]);
    };
    const found = tableBy(kernelEngine());
    const wanted = tableBy(packageEngine());
    for (const [row, columns] of wanted.entries()) {
      for (const [column, value] of columns.entries()) {
        const name = `row ${row}, column ${column}`;
        if (Number.isNaN(value)) expect(found[row]![column], name).toBeNaN();
        else
          expect(Math.abs(found[row]![column]! - value), name).toBeLessThan(
            2e-5 * Math.max(1, Math.abs(value)),
          );
      }
    }
    expect(found.some((columns) => columns.every(Number.isNaN))).toBe(true);
    expect(found[0]!.some(Number.isNaN)).toBe(false);
  });

  it('give the same rows whichever frames are asked for together, from their own memory or not', () => {
    const samples = whiteNoiseSignal(512 * 20, 0.1, 3);
    const engine = kernelEngine();
    const whole = analyseLong(engine, { samples, sampleRateHz: 48_000, size: 512 });
    const own = engine.samples(4096);
    const grid = gridOf(512, samples.length);
    const rows = engine.longFrames({
      grid,
      sampleRateHz: 48_000,
      frames: samples.length,
      bands: [],
      capacity: 7,
    });
    const startSample = 1000;
    own.values.set(samples.subarray(startSample, startSample + 4096));
    rows.analyse({ samples: own.values, startSample, endSample: startSample + 4096 }, 6, 13);
    for (let row = 0; row < 7; row++) {
      expect(powerOf(rows, row)).toEqual(powerOf(whole.rows, row + 6));
      expect(featuresOf(rows, row, 23)).toEqual(featuresOf(whole.rows, row + 6, 23));
    }
  });

  it.each(engines)('%s: give silence no descriptors, and its mean', (_name, makeEngine) => {
    const samples = new Float32Array(512 * 6).fill(0.25);
    const { rows, count, columns } = analyseLong(makeEngine(), { samples, sampleRateHz: 48_000, size: 512 });
    for (let row = 0; row < count; row++) {
      const [mean, meanSquare, peak, crossings, ...rest] = featuresOf(rows, row, columns);
      expect([mean, meanSquare, peak, crossings]).toEqual([0.25, 0, 0.25, 0]);
      expect(rest.every(Number.isNaN)).toBe(true);
    }
  });

  it.each(engines)('%s: see no ultrasound below twice the hearing line', (_name, makeEngine) => {
    const samples = whiteNoiseSignal(2048, 0.1, 5);
    const { rows, columns } = analyseLong(makeEngine(), { samples, sampleRateHz: 24_000, size: 256 });
    expect(featuresOf(rows, 0, columns)[FEATURE.ultrasonicMeanSquare]).toBeNaN();
    expect(featuresOf(rows, 0, columns)[FEATURE.totalMeanSquare]).toBeCloseTo(0.01, 2);
  });

  it.each(engines)(
    '%s: take a recording shorter than a frame as followed by its mean',
    (_name, makeEngine) => {
      const samples = whiteNoiseSignal(300, 0.1, 6).map((x) => x + 0.5);
      const { rows, columns } = analyseLong(makeEngine(), { samples, sampleRateHz: 48_000, size: 512 });
      const spectrum = new FrameSpectrum(512);
      spectrum.analyse(samples, 0, 300);
      expect(powerOf(rows, 1)).toEqual(spectrum.power);
      expect(featuresOf(rows, 1, columns)[FEATURE.mean]).toBeCloseTo(spectrum.mean, 6);
    },
  );

  it.each(engines)(
    '%s: refuse more frames than they have room for, and samples that are not there',
    (_n, make) => {
      const grid = gridOf(512, 51_200);
      const rows = make().longFrames({ grid, sampleRateHz: 48_000, frames: 51_200, bands: [], capacity: 4 });
      const window = { samples: new Float32Array(2048), startSample: 0, endSample: 2048 };
      expect(() => rows.analyse(window, 0, 5)).toThrow(RangeError);
      expect(() => rows.analyse(window, 8, 9)).toThrow(RangeError);
    },
  );

  it.each([128, 500, 32_768])('the kernel refuses frames of %d samples', (size) => {
    const settings = { sampleRateHz: 48_000, frames: 1e6, bands: [], capacity: 1 };
    const engine = kernelEngine();
    expect(() => engine.longFrames({ ...settings, grid: gridOf(size, 1e6) })).toThrow(RangeError);
  });
});

describe('short frames', () => {
  const samples = whiteNoiseSignal(256 * 40, 0.1, 9).map((x) => x + 0.01);
  const grid = gridOf(256, samples.length);
  const settings = { grid, frames: samples.length, firstBin: 27, endBin: 128, capacity: grid.count };

  it.each(engines)(
    '%s: have the powers of their bins and the mean square these carry',
    (_name, makeEngine) => {
      const rows = makeEngine().shortFrames(settings);
      rows.analyse({ samples, startSample: 0, endSample: samples.length }, 0, grid.count);
      const whole = analyseLong(packageEngine(), { samples, sampleRateHz: 192_000, size: 256 });
      for (let row = 0; row < grid.count; row++) {
        const at = row * rows.powerStride;
        const power = powerOf(whole.rows, row);
        const total = power.reduce((sum, value) => sum + value, 0);
        const wanted = power.subarray(27, 128);
        expect(greatestAmplitudeError(rows.power.subarray(at, at + 101), wanted)).toBeLessThan(
          AMPLITUDE_ERROR * total,
        );
        const sum = wanted.reduce((all, value) => all + value, 0) / 3;
        expect(rows.meanSquares[row]! / sum).toBeCloseTo(1, 5);
      }
    },
  );
});
