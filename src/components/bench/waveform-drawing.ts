import type { Palette } from '@/theme/palette.ts';

export interface WaveformLook {
  /** Value at the full height of the drawing, as a share of full scale. */
  scale: number;
  colours: Palette;
}

/** Draws one pixel column per pair of least and greatest value; where there is no value, nothing. */
export function drawWaveform(
  context: CanvasRenderingContext2D,
  columns: ArrayLike<number>,
  { scale, colours }: WaveformLook,
): void {
  const { width, height } = context.canvas;
  const middle = height / 2;
  const reach = (middle - 1) / scale;
  context.fillStyle = colours.hairline;
  context.fillRect(0, Math.round(middle), width, 1);
  context.fillStyle = colours.melt;
  // One path for all columns: filling each by itself takes several times as long.
  context.beginPath();
  let lastTop = Number.NaN;
  let lastBottom = Number.NaN;
  for (let x = 0; x < Math.min(width, columns.length / 2); x++) {
    const least = columns[2 * x] ?? Number.NaN;
    const greatest = columns[2 * x + 1] ?? Number.NaN;
    if (Number.isNaN(least)) continue;
    let top = middle - greatest * reach;
    let bottom = middle - least * reach;
    // Neighbours that would not touch are joined, so that a steep edge stays a line.
    if (top > lastBottom) top = lastBottom;
    if (bottom < lastTop) bottom = lastTop;
    lastTop = middle - greatest * reach;
    lastBottom = middle - least * reach;
    context.rect(x, top - 0.5, 1, Math.max(1.4, bottom - top + 1));
  }
  context.fill();
}
