import { drawPicture } from '@/components/bench/band-drawing.ts';
import { prepareCanvas } from '@/components/bench/canvas-size.ts';
import { composeBand } from '@/components/bench/compose-band.ts';
import { keptBand } from '@/components/bench/kept-image.ts';
import { toneTable } from '@/components/bench/tile-tones.ts';
import { FIRST_SPLIT, placeStage } from '@/composables/bench/stage-places.ts';
import { columnSamples, levelFor, tilesOfWindow } from '@/composables/bench/tile-plan.ts';
import { topFrequency } from '@/composables/bench/unseen-bands.ts';
import { palettes } from '@/theme/palette.ts';
import type { Tile } from '@shared/audio/tile.ts';
import type { PictureLayout, TileLayout } from '@shared/contract/views.ts';

// Runs in the browser: milliseconds of giving pictures other colours, by the client's own functions.

export interface Recolouring {
  /** Eight tiles side by side, a pixel per column. */
  eightTilesMs: number[];
  /** Both bands as a wide window shows them. */
  wholeMs: number[];
  wholeTiles: number;
}

const EIGHT = 8;
const HEIGHT_PX = 400;
const STAGE = { widthPx: 1600, heightPx: 800 };
const RANGES_DB = [46, 40];
const EMPTY_PIXEL = 0xffffffff;

/** Codes as a picture of noise has them. */
function makeTile(layout: PictureLayout, level: number, tile: number): Tile {
  const samplesPerColumn = columnSamples(layout, level);
  const { bins, lowHz, highHz, columnsPerTile: columns } = layout;
  const codes = Uint8Array.from({ length: bins * columns }, (_, i) => 60 + ((i * 2654435761) >>> 27));
  const place = { samplesPerColumn, startSample: tile * columns * samplesPerColumn };
  return { bins, columns, lowHz, highHz, minimumDb: -120, dbPerCode: 0.5, codes, ...place };
}

function tileStore() {
  const tiles = new Map<string, Tile>();
  return (layout: PictureLayout) => (level: number, tile: number) => {
    const key = `${layout.band}/${level}/${tile}`;
    const known = tiles.get(key) ?? makeTile(layout, level, tile);
    tiles.set(key, known);
    return known;
  };
}

function contextOf(widthPx: number, heightPx: number): CanvasRenderingContext2D {
  const canvas = document.createElement('canvas');
  document.body.append(canvas);
  const context = prepareCanvas(canvas, widthPx, heightPx, 1);
  if (!context) throw new Error('The browser gives no context to draw in.');
  return context;
}

const tonesOf = (round: number) =>
  toneTable({ map: 'frost', floorDb: -90, rangeDb: RANGES_DB[round % RANGES_DB.length]! });

/** Reading a pixel back waits until everything is drawn. */
function time(context: CanvasRenderingContext2D, rounds: number, draw: (round: number) => void): number[] {
  draw(0);
  return Array.from({ length: rounds }, (_, round) => {
    const startedMs = performance.now();
    draw(round + 1);
    context.getImageData(0, 0, 1, 1);
    return performance.now() - startedMs;
  });
}

function timeEightTiles(layout: PictureLayout, rounds: number): number[] {
  const widthPx = EIGHT * layout.columnsPerTile;
  const window = { startSample: 0, endSample: widthPx * layout.samplesPerColumn };
  const context = contextOf(widthPx, HEIGHT_PX);
  const findTile = tileStore()(layout);
  const { lowHz, highHz } = layout;
  return time(context, rounds, (round) => {
    const { image, pixels } = keptBand(context, layout.band, { widthPx, heightPx: HEIGHT_PX });
    const band = { layout, window, lowHz, highHz, widthPx, heightPx: HEIGHT_PX, findTile };
    composeBand(pixels, 0, {
      ...band,
      table: tonesOf(round),
      emptyPixel: EMPTY_PIXEL,
    });
    context.putImageData(image, 0, 0);
  });
}

function timeWhole(layout: TileLayout, rounds: number): Pick<Recolouring, 'wholeMs' | 'wholeTiles'> {
  const places = placeStage({ ...STAGE, split: FIRST_SPLIT, topHz: topFrequency(layout.sampleRateHz) });
  const audible = layout.pictures.find(({ band }) => band === 'audible')!;
  const window = { startSample: 0, endSample: 2 * places.plotWidthPx * audible.samplesPerColumn };
  const context = contextOf(STAGE.widthPx, places.waveTopPx);
  const store = tileStore();
  const layoutOf = (band: string) => layout.pictures.find((picture) => picture.band === band)!;
  const wholeMs = time(context, rounds, (round) =>
    drawPicture(context, {
      places,
      window,
      layout,
      unseen: [],
      colours: palettes.light,
      pixelRatio: 1,
      tonesOf: () => ({ table: tonesOf(round), key: String(round) }),
      findTile: (_channel, band) => store(layoutOf(band)),
    }),
  );
  const samplesPerPixel = (window.endSample - window.startSample) / places.plotWidthPx;
  const wholeTiles = layout.pictures.reduce(
    (sum, picture) => sum + tilesOfWindow(picture, window, levelFor(picture, samplesPerPixel)).length,
    0,
  );
  return { wholeMs, wholeTiles };
}

export function recolour(layout: TileLayout, rounds: number): Recolouring {
  const audible = layout.pictures.find(({ band }) => band === 'audible');
  if (!audible) throw new Error('The recording has no audible picture.');
  return { eightTilesMs: timeEightTiles(audible, rounds), ...timeWhole(layout, rounds) };
}
