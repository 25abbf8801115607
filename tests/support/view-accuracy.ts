import { readFileSync } from 'node:fs';
import { ViewLayout, viewPath, type FileRegion } from '../../server/measuring/view-layout.ts';
import { readManifest } from '../../server/measuring/view-manifest.ts';
import { FIRST_STORED_LEVELS } from '../../server/signal/spectrogram-columns.ts';

/** What is stored of the first channel at its finest: rows of descriptors, codes of both pictures, pairs of peaks. */
export interface ViewValues {
  columns: readonly string[];
  /** Row after row. */
  frames: ArrayLike<number>;
  audible: Uint8Array;
  ultrasonic: Uint8Array;
  peaks: Float32Array;
}

export interface ViewErrors {
  /** For each column, the median over the frames of |ours - reference| / |reference|; levels are compared as amplitudes. */
  medianRelative: Record<string, number>;
  /** The greatest difference of any code. */
  codes: { audible: number; ultrasonic: number };
  differingPeaks: number;
}

export async function readViewValues(viewsDir: string): Promise<ViewValues> {
  const manifest = await readManifest(viewsDir);
  const layout = new ViewLayout(manifest.format);
  const read = (file: Parameters<typeof viewPath>[1], { offsetBytes, sizeBytes }: FileRegion) =>
    new Uint8Array(readFileSync(viewPath(viewsDir, file))).slice(offsetBytes, offsetBytes + sizeBytes);
  return {
    columns: manifest.frameColumns,
    frames: new Float32Array(read('frames', layout.frameRegion(0)).buffer),
    audible: read('audible', layout.pictureRegion('audible', 0, FIRST_STORED_LEVELS.audible)),
    ultrasonic: read('ultrasonic', layout.pictureRegion('ultrasonic', 0, FIRST_STORED_LEVELS.ultrasonic)),
    peaks: new Float32Array(read('peaks', layout.peakRegion(0, 0)).buffer),
  };
}

/** @throws RangeError where the reference has not all that is to be compared. */
export function compareViews(ours: ViewValues, reference: ViewValues): ViewErrors {
  const columns = ours.columns.map((name) => [name, columnError(name, ours, reference)] as const);
  return {
    medianRelative: Object.fromEntries(columns),
    codes: {
      audible: greatestDifference(ours.audible, reference.audible),
      ultrasonic: greatestDifference(ours.ultrasonic, reference.ultrasonic),
    },
    differingPeaks: countDifferent(ours.peaks, reference.peaks),
  };
}

function columnError(name: string, ours: ViewValues, reference: ViewValues): number {
  const isLevel = /Db(Fs)?$/.test(name);
  const value = (stored: number) => (isLevel ? 10 ** (stored / 20) : stored);
  const found = columnOf(ours, name).map(value);
  const wanted = columnOf(reference, name).map(value);
  requireSameLength(name, found, wanted);
  const errors = wanted.flatMap((right, frame) => relativeError(found[frame]!, right));
  errors.sort((a, b) => a - b);
  return errors[Math.floor(errors.length / 2)] ?? 0;
}

/** Nothing for a frame that has no value in both. */
function relativeError(found: number, wanted: number): number[] {
  if (Number.isNaN(found) && Number.isNaN(wanted)) return [];
  if (Number.isNaN(found) || Number.isNaN(wanted)) return [Infinity];
  return [found === wanted ? 0 : Math.abs(found - wanted) / Math.abs(wanted)];
}

function columnOf({ columns, frames }: ViewValues, name: string): number[] {
  const column = columns.indexOf(name);
  if (column < 0) throw new RangeError(`There is no column ${name}.`);
  const count = frames.length / columns.length;
  return Array.from({ length: count }, (_, frame) => frames[frame * columns.length + column]!);
}

function greatestDifference(ours: Uint8Array, reference: Uint8Array): number {
  requireSameLength('codes', ours, reference);
  return ours.reduce((most, code, at) => Math.max(most, Math.abs(code - reference[at]!)), 0);
}

function countDifferent(ours: Float32Array, reference: Float32Array): number {
  requireSameLength('peaks', ours, reference);
  return ours.reduce((count, value, at) => count + (value === reference[at] ? 0 : 1), 0);
}

function requireSameLength(what: string, ours: ArrayLike<number>, reference: ArrayLike<number>): void {
  if (ours.length === reference.length) return;
  throw new RangeError(`${what}: ${ours.length} of ours, ${reference.length} of the reference`);
}
