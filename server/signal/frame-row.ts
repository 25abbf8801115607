/** Columns of the table of long frames, in order; each name states the definition and the unit. */
export const FRAME_COLUMNS = [
  'rmsDbFs',
  'peakDbFs',
  'crestDb',
  'zeroCrossingsPerSecond',
  'centroidAmplitudeHz',
  'spreadAmplitudeHz',
  'flatnessAmplitude',
  'rolloff99AmplitudeHz',
  'levelAbove20kHzDbFs',
  'shareAbove20kHz',
] as const;
export type FrameColumn = (typeof FRAME_COLUMNS)[number];

/** One row; NaN stands for what a silent frame does not have. */
export type FrameRow = Float32Array;

export const FRAME_ROW_LENGTH = FRAME_COLUMNS.length;
