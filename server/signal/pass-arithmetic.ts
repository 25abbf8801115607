import type {
  BlockSummer,
  CellSummer,
  ColumnEngine,
  FrameEngine,
  LongFrameRows,
  PowerRows,
  ShortFrameRows,
} from './frame-engine.ts';
import { bandBins, type FramePlan } from './frame-plan.ts';
import { rowBands } from './frame-row.ts';
import { samplesPerLowMean } from './low-rate.ts';
import { samplesPerMean } from './mains.ts';
import { packageShortFrames } from './package-rows.ts';
import { CELL_SAMPLES } from './sample-cells.ts';
import type { OpenSpectrumTables } from './spectrum-tables.ts';
import type { Picture } from './spectrogram-columns.ts';

/** Frames computed at once, multiples of those of a column. */
export const LONG_FRAMES_AT_ONCE = 64;
export const SHORT_FRAMES_AT_ONCE = 256;

/** What the channels of a pass share: each renews the rows and tables when its turn comes. */
export interface PassArithmetic {
  long: LongFrameRows;
  /** Short frames above the hearing line; none where the rate leaves nothing there. */
  short: ShortFrameRows | undefined;
  /** Frames of the audible picture where these are longer than the long frames. */
  audible: PowerRows | undefined;
  sumCells: CellSummer;
  sumMeans: BlockSummer;
  sumLowMeans: BlockSummer;
  columns: ColumnEngine;
  openTables: OpenSpectrumTables;
}

/** @param blockFrames most samples of a channel in one push. */
export function openArithmetic(
  engine: FrameEngine,
  plan: FramePlan,
  pictures: readonly Picture[],
  blockFrames: number,
): PassArithmetic {
  const { long, short, frames, sampleRateHz } = plan;
  const ultrasonic = bandBins('ultrasonic', short.size, sampleRateHz);
  const audible = pictures.find(({ layout }) => layout.band === 'audible');
  const means = samplesPerMean(sampleRateHz);
  const lowMeans = samplesPerLowMean(sampleRateHz);
  return {
    long: engine.longFrames({
      grid: long,
      sampleRateHz,
      frames,
      bands: rowBands(plan),
      capacity: LONG_FRAMES_AT_ONCE,
    }),
    short:
      ultrasonic.end > ultrasonic.first
        ? engine.shortFrames({
            grid: short,
            frames,
            firstBin: ultrasonic.first,
            endBin: ultrasonic.end,
            capacity: SHORT_FRAMES_AT_ONCE,
          })
        : undefined,
    // Frames longer than the longest of the kernel.
    audible:
      audible && audible.grid.size !== long.size
        ? packageShortFrames({ ...audible, frames, capacity: LONG_FRAMES_AT_ONCE })
        : undefined,
    sumCells: engine.cellSummer(Math.ceil(blockFrames / CELL_SAMPLES) + 1),
    sumMeans: engine.blockSummer(means, Math.ceil(blockFrames / means)),
    sumLowMeans: engine.blockSummer(lowMeans, Math.ceil(blockFrames / lowMeans)),
    columns: engine,
    openTables: (settings) => engine.spectrumTables(settings),
  };
}
