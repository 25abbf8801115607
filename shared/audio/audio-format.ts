/** How samples lie in a file: what a header must say before one of them can be decoded. */
export type SampleLayout = {
  encoding: 'integer' | 'float';
  /** Width of one sample in the file (the container, where fewer bits are valid). */
  bitsPerSample: number;
  channels: number;
};

/** What the bytes are packed in, as they were brought in. */
export type AudioContainer = 'RIFF' | 'RF64' | 'BW64' | 'FLAC' | 'raw' | 'CSV' | 'capture-set';

/** The format of a recording as its header and its real size tell it. */
export type AudioFormat = SampleLayout & {
  container: AudioContainer;
  sampleRateHz: number;
  /** Whole frames that are really there. */
  frames: number;
  extensible: boolean;
  /** Full sentences: what was odd and how it was taken. */
  warnings: string[];
};

/** Bytes of one frame: one sample of every channel. */
export function bytesPerFrame(layout: SampleLayout): number {
  return (layout.channels * layout.bitsPerSample) / 8;
}
