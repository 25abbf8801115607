import type { TileLayout } from '@shared/contract/views.ts';
import { frequencyTicks, yOfFrequency } from '@/composables/bench/frequency-axis.ts';
import type { BandPlace } from '@/composables/bench/frequency-axis.ts';
import type { ChannelRow, StagePlaces } from '@/composables/bench/stage-places.ts';
import { levelFor } from '@/composables/bench/tile-plan.ts';
import { windowSamples } from '@/composables/bench/time-axis.ts';
import type { TimeWindow } from '@/composables/bench/time-axis.ts';
import type { UnseenBand } from '@/composables/bench/unseen-bands.ts';
import { composeBand } from '@/components/bench/compose-band.ts';
import type { FindTile } from '@/components/bench/compose-band.ts';
import { keptBand, moveKept, partsToPaint } from '@/components/bench/kept-image.ts';
import { drawRowName } from '@/components/bench/row-name.ts';
import { drawUnseen } from '@/components/bench/unseen-drawing.ts';
import { FIGURE_FONT } from '@/components/bench/useCanvas.ts';
import type { Palette } from '@/theme/palette.ts';

/** How the codes of a band become colours. */
export interface BandTones {
  /** Pixel of each code, or of each code over the quiet. */
  table: Uint32Array;
  /** Equal for equal tables. */
  key: string;
}

export interface PictureScene {
  places: StagePlaces;
  window: TimeWindow;
  layout: TileLayout;
  unseen: readonly UnseenBand[];
  colours: Palette;
  pixelRatio: number;
  /** By band and level of the tiles. */
  tonesOf: (band: BandPlace['band'], level: number) => BandTones;
  findTile: (channel: number, band: BandPlace['band']) => FindTile;
  /** What is quiet in each bin of a level; without it, levels are shown as they are. */
  quietOf?: (
    channel: number,
    band: BandPlace['band'],
  ) => ((level: number) => ArrayLike<number> | undefined) | undefined;
}

/** All from the wanted level, coarser ones standing in, or a part of it without any. */
export type Drawn = 'whole' | 'partly' | 'empty';

/**
 * Every shown channel with its bands, what cannot be seen of them, and their frequency axes.
 *
 * @returns what is drawn of it.
 */
export function drawPicture(context: CanvasRenderingContext2D, scene: PictureScene): Drawn {
  const { rows } = scene.places;
  const drawn = new Set<Drawn>();
  for (const row of rows) {
    for (const place of [row.ultrasonic, row.audible]) {
      drawn.add(drawBand(context, { row, place }, scene));
      drawUnseen(context, place, scene);
      drawAxis(context, place, scene);
    }
    if (rows.length > 1) drawRowName(context, row, scene);
  }
  if (drawn.has('empty')) return 'empty';
  return drawn.has('partly') ? 'partly' : 'whole';
}

function pixelOf(hex: string): number {
  const [red, green, blue] = [1, 3, 5].map((at) => Number.parseInt(hex.slice(at, at + 2), 16));
  return ((255 << 24) | ((blue ?? 0) << 16) | ((green ?? 0) << 8) | (red ?? 0)) >>> 0;
}

function drawBand(
  context: CanvasRenderingContext2D,
  { row, place }: { row: ChannelRow; place: BandPlace },
  scene: PictureScene,
): Drawn {
  const { places, window, colours, pixelRatio } = scene;
  const layout = scene.layout.pictures.find(({ band }) => band === place.band);
  if (!layout) {
    context.fillStyle = colours.tint;
    context.fillRect(places.gutterPx, place.topPx, places.plotWidthPx, place.heightPx);
    return 'whole';
  }
  const widthPx = Math.round(places.plotWidthPx * pixelRatio);
  const heightPx = Math.round(place.heightPx * pixelRatio);
  const samplesPerPixel = windowSamples(window) / widthPx;
  const level = levelFor(layout, samplesPerPixel);
  const tones = scene.tonesOf(place.band, level);
  const quietOf = scene.quietOf?.(row.channel, place.band);
  const range = { lowHz: place.lowHz, highHz: place.highHz };
  const key = [tones.key, quietOf !== undefined, level, range.lowHz, range.highHz, colours.tint].join('/');
  const kept = keptBand(context, `${row.channel}/${place.band}`, { widthPx, heightPx });
  const shown = moveKept(kept, { key, startSample: window.startSample, samplesPerPixel });
  const findTile = scene.findTile(row.channel, place.band);
  const emptyPixel = pixelOf(colours.tint);
  const image = { ...range, layout, window: shown, widthPx, heightPx, table: tones.table, emptyPixel };
  let empty = 0;
  for (const part of partsToPaint(kept.whole))
    empty += composeBand(kept.pixels, level, { ...image, findTile, quietOf }, { ...part, whole: kept.whole });
  const [left, top] = [places.gutterPx, place.topPx].map((px) => Math.round(px * pixelRatio));
  context.putImageData(kept.image, left ?? 0, top ?? 0);
  if (empty > 0) return 'empty';
  return kept.whole.includes(0) ? 'partly' : 'whole';
}

function drawAxis(context: CanvasRenderingContext2D, place: BandPlace, scene: PictureScene): void {
  const { places, colours } = scene;
  context.font = FIGURE_FONT;
  context.fillStyle = colours.inkQuiet;
  context.strokeStyle = colours.edge;
  context.textAlign = 'right';
  context.textBaseline = 'middle';
  context.lineWidth = 1;
  for (const { value, label } of frequencyTicks(place)) {
    const y = Math.round(yOfFrequency(value, place)) + 0.5;
    context.fillText(label, places.gutterPx - 8, y);
    context.beginPath();
    context.moveTo(places.gutterPx - 4, y);
    context.lineTo(places.gutterPx, y);
    context.stroke();
  }
}
