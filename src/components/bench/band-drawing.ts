import type { TileLayout } from '@shared/contract/views.ts';
import { frequencyTicks, yOfFrequency } from '@/composables/bench/frequency-axis.ts';
import type { BandPlace } from '@/composables/bench/frequency-axis.ts';
import type { StagePlaces } from '@/composables/bench/stage-places.ts';
import { levelFor } from '@/composables/bench/tile-plan.ts';
import type { TimeWindow } from '@/composables/bench/time-axis.ts';
import { wholeBandReason } from '@/composables/bench/unseen-bands.ts';
import type { UnseenBand } from '@/composables/bench/unseen-bands.ts';
import { composeBand } from '@/components/bench/compose-band.ts';
import type { FindTile } from '@/components/bench/compose-band.ts';
import { keptImage } from '@/components/bench/kept-image.ts';
import { FIGURE_FONT, WORD_FONT } from '@/components/bench/useCanvas.ts';
import type { Palette } from '@/theme/palette.ts';

export interface PictureScene {
  places: StagePlaces;
  window: TimeWindow;
  layout: TileLayout;
  unseen: readonly UnseenBand[];
  colours: Palette;
  pixelRatio: number;
  /** Pixel of each code, by band and level of the tiles. */
  tableOf: (band: BandPlace['band'], level: number) => Uint32Array;
  findTile: (band: BandPlace['band']) => FindTile;
}

/** Both bands with what cannot be seen of them, and their frequency axes. */
export function drawPicture(context: CanvasRenderingContext2D, scene: PictureScene): void {
  for (const place of [scene.places.ultrasonic, scene.places.audible]) {
    drawBand(context, place, scene);
    drawUnseen(context, place, scene);
    drawAxis(context, place, scene);
  }
}

function pixelOf(hex: string): number {
  const [red, green, blue] = [1, 3, 5].map((at) => Number.parseInt(hex.slice(at, at + 2), 16));
  return ((255 << 24) | ((blue ?? 0) << 16) | ((green ?? 0) << 8) | (red ?? 0)) >>> 0;
}

function drawBand(context: CanvasRenderingContext2D, place: BandPlace, scene: PictureScene): void {
  const { places, window, colours, pixelRatio } = scene;
  context.fillStyle = colours.tint;
  context.fillRect(places.gutterPx, place.topPx, places.plotWidthPx, place.heightPx);
  const layout = scene.layout.pictures.find(({ band }) => band === place.band);
  if (!layout) return;
  const widthPx = Math.round(places.plotWidthPx * pixelRatio);
  const heightPx = Math.round(place.heightPx * pixelRatio);
  const level = levelFor(layout, (window.endSample - window.startSample) / widthPx);
  const image = keptImage(context, place.band, { widthPx, heightPx });
  composeBand(new Uint32Array(image.data.buffer), level, {
    layout,
    window,
    lowHz: place.lowHz,
    highHz: place.highHz,
    widthPx,
    heightPx,
    table: scene.tableOf(place.band, level),
    emptyPixel: pixelOf(colours.tint),
    findTile: scene.findTile(place.band),
  });
  context.putImageData(image, Math.round(places.gutterPx * pixelRatio), Math.round(place.topPx * pixelRatio));
}

function hatchPattern(context: CanvasRenderingContext2D, colours: Palette): CanvasPattern | null {
  const cell = new OffscreenCanvas(8, 8);
  const pen = cell.getContext('2d');
  if (!pen) return null;
  pen.fillStyle = colours.tint;
  pen.fillRect(0, 0, 8, 8);
  pen.strokeStyle = colours.edge;
  pen.lineWidth = 1;
  pen.beginPath();
  for (const shift of [-8, 0, 8]) {
    pen.moveTo(shift - 1, 9);
    pen.lineTo(shift + 9, -1);
  }
  pen.stroke();
  return context.createPattern(cell, 'repeat');
}

function drawUnseen(context: CanvasRenderingContext2D, place: BandPlace, scene: PictureScene): void {
  const { places, unseen, colours } = scene;
  const pattern = hatchPattern(context, colours);
  if (!pattern) return;
  for (const { lowHz, highHz } of unseen) {
    if (highHz <= place.lowHz || lowHz >= place.highHz) continue;
    const top = yOfFrequency(highHz, place);
    const height = yOfFrequency(lowHz, place) - top;
    context.fillStyle = pattern;
    context.fillRect(places.gutterPx, top, places.plotWidthPx, height);
  }
  const whole = wholeBandReason(place.lowHz, place.highHz, unseen);
  if (whole) drawPlate(context, place, scene, whole);
  else drawPartReasons(context, place, scene);
}

function drawPlate(
  context: CanvasRenderingContext2D,
  place: BandPlace,
  { places, colours }: PictureScene,
  reason: string,
): void {
  const name =
    place.band === 'ultrasonic' ? 'Nothing above 20 kHz can be seen' : 'Nothing audible can be seen';
  writePlate(context, `${name}: ${reason}.`, colours, {
    x: places.gutterPx + places.plotWidthPx / 2,
    y: place.topPx + place.heightPx / 2,
    align: 'center',
  });
}

/** A thinner strip of hatch has no room for words; the pills of the page have them. */
const LEAST_WORDS_PX = 12;

function drawPartReasons(context: CanvasRenderingContext2D, place: BandPlace, scene: PictureScene): void {
  for (const { lowHz, highHz, reason } of scene.unseen) {
    const isHere = highHz > place.lowHz && lowHz < place.highHz;
    const middle = (Math.max(lowHz, place.lowHz) + Math.min(highHz, place.highHz)) / 2;
    const y = Math.min(
      place.topPx + place.heightPx - 11,
      Math.max(place.topPx + 11, yOfFrequency(middle, place)),
    );
    const top = yOfFrequency(Math.min(highHz, place.highHz), place);
    const isTall = yOfFrequency(Math.max(lowHz, place.lowHz), place) - top >= LEAST_WORDS_PX;
    if (isHere && isTall) {
      const x = scene.places.gutterPx + scene.places.plotWidthPx - 8;
      writePlate(context, reason, scene.colours, { x, y, align: 'right' });
    }
  }
}

interface PlatePlace {
  x: number;
  y: number;
  align: 'center' | 'right';
}

function writePlate(
  context: CanvasRenderingContext2D,
  text: string,
  colours: Palette,
  { x, y, align }: PlatePlace,
): void {
  context.font = WORD_FONT;
  const width = context.measureText(text).width + 16;
  const left = align === 'center' ? x - width / 2 : x - width;
  context.fillStyle = colours.paper;
  context.fillRect(left, y - 10, width, 20);
  context.fillStyle = colours.ink;
  context.textAlign = 'left';
  context.textBaseline = 'middle';
  context.fillText(text, left + 8, y + 0.5);
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
