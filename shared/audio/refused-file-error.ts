export type FileRefusal =
  | 'empty'
  | 'not-audio'
  | 'other-audio'
  /** MP4 or QuickTime: a browser can take its sound out. */
  | 'film'
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
  | 'too-many-chunks'
  | 'damaged'
  | 'layout'
  | 'capture-set'
  | 'non-finite'
  /** Could be brought in with a declared layout: a table of numbers, or raw samples. */
  | 'text'
  | 'unknown';

/** A file that cannot be brought in; `message` is a whole sentence for the person who chose it. */
export class RefusedFileError extends Error {
  readonly code: FileRefusal;

  constructor(code: FileRefusal, message: string, options?: ErrorOptions) {
    super(message, options);
    this.name = 'RefusedFileError';
    this.code = code;
  }
}
