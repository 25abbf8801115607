import type { PictureBand } from '../../shared/contract/views.ts';
import type { ColumnEngine, PowerRows } from './frame-engine.ts';
import { COLUMN_FACTOR, ColumnPyramid, FIRST_STORED_LEVELS, type Picture } from './spectrogram-columns.ts';

interface PictureColumnsSettings {
  columnLevels: Record<PictureBand, number>;
  arithmetic: { columns: ColumnEngine };
  views: { column(band: PictureBand, level: number, codes: Uint8Array): void };
}

/** Frames that make a column of the first stored level of a picture. */
export function framesPerColumn(band: PictureBand): number {
  return COLUMN_FACTOR ** FIRST_STORED_LEVELS[band];
}

/** Makes the columns of the stored levels of a picture from rows of powers. */
export class PictureColumns {
  readonly #picture: Picture;
  readonly #pyramid: ColumnPyramid | undefined;

  constructor(picture: Picture, { columnLevels, arithmetic, views }: PictureColumnsSettings) {
    const { band, bins } = picture.layout;
    const levels = columnLevels[band];
    const firstLevel = FIRST_STORED_LEVELS[band];
    this.#picture = picture;
    const sink = (level: number, codes: Uint8Array) => views.column(band, level, codes);
    this.#pyramid =
      levels > firstLevel
        ? new ColumnPyramid({ bins, firstLevel, levels, engine: arithmetic.columns, sink })
        : undefined;
  }

  /** @param count rows of the next columns of level 0; a multiple of `framesPerColumn`, save the last ones of a segment. */
  push(rows: PowerRows, count: number): void {
    if (!this.#pyramid) return;
    const { layout, firstBin, endBin } = this.#picture;
    const range = { first: firstBin, end: endBin };
    this.#pyramid.push(rows.encode({ firstRow: 0, endRow: count }, range, framesPerColumn(layout.band)));
  }

  finish(): void {
    this.#pyramid?.finish();
  }
}
