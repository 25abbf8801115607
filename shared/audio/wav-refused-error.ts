export type WavRefusal =
  | 'empty'
  | 'not-audio'
  | 'other-audio'
  | 'big-endian'
  | 'no-format'
  | 'broken-format'
  | 'compressed'
  | 'width'
  | 'channels'
  | 'rate'
  | 'block-align'
  | 'no-data'
  | 'no-frames'
  | 'too-many-chunks';

/** A file that cannot be brought in; `message` is a whole sentence for the person who chose it. */
export class WavRefusedError extends Error {
  readonly code: WavRefusal;

  constructor(code: WavRefusal, message: string) {
    super(message);
    this.name = 'WavRefusedError';
    this.code = code;
  }
}
