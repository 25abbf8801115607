/** Gives a canvas the pixels of the screen and a context that is drawn on in CSS pixels. */
export function prepareCanvas(
  canvas: HTMLCanvasElement,
  widthPx: number,
  heightPx: number,
  pixelRatio: number,
): CanvasRenderingContext2D | null {
  const width = Math.max(1, Math.round(widthPx * pixelRatio));
  const height = Math.max(1, Math.round(heightPx * pixelRatio));
  if (canvas.width !== width) canvas.width = width;
  if (canvas.height !== height) canvas.height = height;
  const context = canvas.getContext('2d');
  context?.setTransform(pixelRatio, 0, 0, pixelRatio, 0, 0);
  context?.clearRect(0, 0, widthPx, heightPx);
  return context;
}
