import type { PictureBand, TileLayout } from '@shared/contract/views.ts';
import { levelFor } from '@/composables/bench/tile-plan.ts';
import type { TimeWindow } from '@/composables/bench/time-axis.ts';
import { composeBand } from '@/components/bench/compose-band.ts';
import type { FindTile } from '@/components/bench/compose-band.ts';

export interface ThumbScene {
  window: TimeWindow;
  layout: TileLayout;
  size: { widthPx: number; heightPx: number; pixelRatio: number };
  /** Colour of what is not loaded yet, as #rrggbb. */
  tint: string;
  tableOf: (band: PictureBand, level: number) => Uint32Array;
  findTile: (band: PictureBand) => FindTile;
}

/** The band above the hearing line gets most of the height, as in the large picture. */
const ULTRASONIC_SHARE = 0.66;
const GAP_PX = 1;

export function drawThumb(context: CanvasRenderingContext2D, scene: ThumbScene): void {
  const { layout, size } = scene;
  const heightPx = Math.round(size.heightPx * size.pixelRatio);
  const hasBoth = layout.pictures.length > 1;
  const upperPx = hasBoth ? Math.round(heightPx * ULTRASONIC_SHARE) : heightPx;
  const places = {
    ultrasonic: { topPx: 0, heightPx: upperPx },
    audible: hasBoth
      ? { topPx: upperPx + GAP_PX, heightPx: heightPx - upperPx - GAP_PX }
      : { topPx: 0, heightPx },
  };
  for (const picture of layout.pictures) drawPart(context, scene, picture.band, places[picture.band]);
}

function drawPart(
  context: CanvasRenderingContext2D,
  { window, layout, size, tint, tableOf, findTile }: ThumbScene,
  band: PictureBand,
  place: { topPx: number; heightPx: number },
): void {
  const picture = layout.pictures.find((one) => one.band === band);
  const widthPx = Math.round(size.widthPx * size.pixelRatio);
  if (!picture || place.heightPx < 1) return;
  const level = levelFor(picture, (window.endSample - window.startSample) / widthPx);
  const image = context.createImageData(widthPx, place.heightPx);
  composeBand(new Uint32Array(image.data.buffer), level, {
    layout: picture,
    window,
    lowHz: picture.lowHz,
    highHz: picture.highHz,
    widthPx,
    heightPx: place.heightPx,
    table: tableOf(band, level),
    emptyPixel: pixelOf(tint),
    findTile: findTile(band),
  });
  context.putImageData(image, 0, place.topPx);
}

function pixelOf(hex: string): number {
  const [red = 0, green = 0, blue = 0] = [1, 3, 5].map((at) => Number.parseInt(hex.slice(at, at + 2), 16));
  return ((255 << 24) | (blue << 16) | (green << 8) | red) >>> 0;
}
