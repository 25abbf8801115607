import type { PictureBand } from '../../shared/contract/views.ts';
import type { PowerRows } from './frame-engine.ts';
import { COLUMN_FACTOR, ColumnPyramid, type Picture } from './spectrogram-columns.ts';

interface PictureColumnsSettings {
  columnLevels: Record<PictureBand, number>;
  views: { column(band: PictureBand, level: number, codes: Uint8Array): void };
}

/** Makes the columns of a picture, level 1 and up, from rows of powers. */
export class PictureColumns {
  readonly #picture: Picture;
  readonly #pyramid: ColumnPyramid | undefined;

  constructor(picture: Picture, { columnLevels, views }: PictureColumnsSettings) {
    const { band, bins } = picture.layout;
    const levels = columnLevels[band];
    this.#picture = picture;
    const sink = (level: number, codes: Uint8Array) => views.column(band, level, codes);
    this.#pyramid = levels > 1 ? new ColumnPyramid(bins, levels, sink) : undefined;
  }

  /** @param count rows of the next columns of level 0; a multiple of four, save the last ones of a segment. */
  push(rows: PowerRows, count: number): void {
    if (!this.#pyramid) return;
    const { firstBin, endBin } = this.#picture;
    const range = { first: firstBin, end: endBin };
    this.#pyramid.push(rows.encode({ firstRow: 0, endRow: count }, range, COLUMN_FACTOR));
  }

  finish(): void {
    this.#pyramid?.finish();
  }
}
