const keptImages = new WeakMap<CanvasRenderingContext2D, Map<string, ImageData>>();

/**
 * Pixels to paint all of, kept from drawing to drawing as long as the size stays: making them anew takes longer than
 * painting them. They still hold what was painted last.
 */
export function keptImage(
  context: CanvasRenderingContext2D,
  name: string,
  { widthPx, heightPx }: { widthPx: number; heightPx: number },
): ImageData {
  const images = keptImages.get(context) ?? new Map<string, ImageData>();
  keptImages.set(context, images);
  const known = images.get(name);
  if (known?.width === widthPx && known.height === heightPx) return known;
  const image = context.createImageData(widthPx, heightPx);
  images.set(name, image);
  return image;
}
