import { open } from 'node:fs/promises';
import type { Peaks } from '../../shared/contract/views.ts';
import { PYRAMID_BASE, PYRAMID_FACTOR, pyramidCell } from '../signal/pyramid.ts';
import { BlockReader, type AudioPlace } from './block-reader.ts';
import { viewPath, type ViewLayout } from './view-layout.ts';

interface PeakSpan {
  channel: number;
  startSample: number;
  endSample: number;
}

const MAXIMUM_POINTS = 8192;
const READ_SAMPLES = 1 << 18;

/** Step for a span of samples: any length under 256 samples, else a multiple of a cell of the pyramid's `level`. */
export function samplesPerPointFor(
  samples: number,
  points: number,
  levels: number,
): { samplesPerPoint: number; level?: number } {
  const wanted = Math.ceil(samples / Math.min(Math.max(1, points), MAXIMUM_POINTS));
  if (wanted < PYRAMID_BASE) return { samplesPerPoint: wanted };
  const finestThatSuffices = Math.floor(Math.log(wanted / PYRAMID_BASE) / Math.log(PYRAMID_FACTOR) + 1e-9);
  const level = Math.min(finestThatSuffices, levels - 1);
  const cell = pyramidCell(level);
  return { samplesPerPoint: Math.ceil(wanted / cell) * cell, level };
}

export async function peaksFromSamples(
  source: { filePath: string; header: AudioPlace },
  span: PeakSpan,
  samplesPerPoint: number,
): Promise<Peaks> {
  const { channel, startSample, endSample } = span;
  const peaks = emptyPeaks(channel, startSample, samplesPerPoint);
  const pointsPerRead = Math.max(1, Math.floor(READ_SAMPLES / samplesPerPoint));
  const reader = await BlockReader.open(source.filePath, source.header);
  try {
    for (let at = startSample; at < endSample; at += pointsPerRead * samplesPerPoint) {
      const count = Math.min(pointsPerRead * samplesPerPoint, endSample - at);
      const samples = await reader.readChannel(channel, at, count);
      for (let from = 0; from < count; from += samplesPerPoint) {
        addPoint(peaks, samples.subarray(from, Math.min(from + samplesPerPoint, count)));
      }
    }
  } finally {
    await reader.close();
  }
  return peaks;
}

export async function peaksFromPyramid(
  viewsDir: string,
  layout: ViewLayout,
  span: PeakSpan & { level: number; samplesPerPoint: number },
): Promise<Peaks> {
  const cell = pyramidCell(span.level);
  const firstCell = Math.floor(span.startSample / cell);
  const endCell = Math.min(Math.ceil(span.endSample / cell), layout.peakLevels[span.level]!);
  const pairs = await readPairs(viewsDir, layout, { ...span, firstCell, endCell });
  const peaks = emptyPeaks(span.channel, firstCell * cell, span.samplesPerPoint);
  const valuesPerPoint = (2 * span.samplesPerPoint) / cell;
  for (let from = 0; from < pairs.length; from += valuesPerPoint) {
    addPoint(peaks, pairs.subarray(from, from + valuesPerPoint));
  }
  return peaks;
}

async function readPairs(
  viewsDir: string,
  layout: ViewLayout,
  cells: { channel: number; level: number; firstCell: number; endCell: number },
): Promise<Float32Array> {
  const pairs = new Float32Array(2 * (cells.endCell - cells.firstCell));
  const region = layout.peakRegion(cells.channel, cells.level);
  const file = await open(viewPath(viewsDir, 'peaks'), 'r');
  try {
    const bytes = new Uint8Array(pairs.buffer);
    await file.read(bytes, 0, bytes.length, region.offsetBytes + cells.firstCell * 8);
  } finally {
    await file.close();
  }
  return pairs;
}

function emptyPeaks(channel: number, startSample: number, samplesPerPoint: number): Peaks {
  return { channel, startSample, samplesPerPoint, minimum: [], maximum: [] };
}

/** Works on samples and on pairs of minimum and maximum alike. */
function addPoint(peaks: Peaks, values: Float32Array): void {
  let minimum = Infinity;
  let maximum = -Infinity;
  for (const value of values) {
    if (value < minimum) minimum = value;
    if (value > maximum) maximum = value;
  }
  peaks.minimum.push(minimum);
  peaks.maximum.push(maximum);
}
