import { yOfFrequency } from '@/composables/bench/frequency-axis.ts';
import type { BandPlace } from '@/composables/bench/frequency-axis.ts';
import type { StagePlaces } from '@/composables/bench/stage-places.ts';
import { wholeBandReason } from '@/composables/bench/unseen-bands.ts';
import type { UnseenBand } from '@/composables/bench/unseen-bands.ts';
import { WORD_FONT } from '@/components/bench/useCanvas.ts';
import type { Palette } from '@/theme/palette.ts';

export interface UnseenScene {
  places: StagePlaces;
  unseen: readonly UnseenBand[];
  colours: Palette;
}

interface Stretch {
  topPx: number;
  bottomPx: number;
}

/** From top to bottom, what of the stage shows something: the bands without their hatch, and the waveform. */
export function seenStretches(
  { rows, waveTopPx, waveHeightPx }: Pick<StagePlaces, 'rows' | 'waveTopPx' | 'waveHeightPx'>,
  unseen: readonly UnseenBand[],
): Stretch[] {
  const bands = rows.flatMap(({ ultrasonic, audible }) => [ultrasonic, audible]);
  const wave = { topPx: waveTopPx, bottomPx: waveTopPx + waveHeightPx };
  return [...bands.flatMap((place) => seenOfBand(place, unseen)), wave];
}

function seenOfBand(place: BandPlace, unseen: readonly UnseenBand[]): Stretch[] {
  const bottomPx = place.topPx + place.heightPx;
  const hatched = unseen
    .map(({ lowHz, highHz }) => ({
      topPx: yOfFrequency(highHz, place),
      bottomPx: yOfFrequency(lowHz, place),
    }))
    .toSorted((a, b) => a.topPx - b.topPx);
  const starts = [place.topPx, ...hatched.map((one) => one.bottomPx)];
  const ends = [...hatched.map((one) => one.topPx), bottomPx];
  return starts
    .map((topPx, index) => ({ topPx, bottomPx: ends[index] ?? bottomPx }))
    .filter((stretch) => stretch.bottomPx > stretch.topPx);
}

const patterns = new Map<string, CanvasPattern | null>();

/** Made once for each pair of colours: a new canvas for every drawing would cost more than the drawing. */
function hatchPattern(context: CanvasRenderingContext2D, { tint, edge }: Palette): CanvasPattern | null {
  const key = `${tint}/${edge}`;
  const known = patterns.get(key) ?? makePattern(context, tint, edge);
  patterns.set(key, known);
  return known;
}

function makePattern(context: CanvasRenderingContext2D, tint: string, edge: string): CanvasPattern | null {
  const cell = new OffscreenCanvas(8, 8);
  const pen = cell.getContext('2d');
  if (!pen) return null;
  pen.fillStyle = tint;
  pen.fillRect(0, 0, 8, 8);
  pen.strokeStyle = edge;
  pen.lineWidth = 1;
  pen.beginPath();
  for (const shift of [-8, 0, 8]) {
    pen.moveTo(shift - 1, 9);
    pen.lineTo(shift + 9, -1);
  }
  pen.stroke();
  return context.createPattern(cell, 'repeat');
}

/** Hatches the frequencies that cannot be seen, with the reasons in words. */
export function drawUnseen(context: CanvasRenderingContext2D, place: BandPlace, scene: UnseenScene): void {
  const { places, unseen, colours } = scene;
  const pattern = unseen.length > 0 ? hatchPattern(context, colours) : null;
  if (!pattern) return;
  for (const { lowHz, highHz } of unseen) {
    if (highHz <= place.lowHz || lowHz >= place.highHz) continue;
    const top = yOfFrequency(highHz, place);
    const height = yOfFrequency(lowHz, place) - top;
    context.fillStyle = pattern;
    context.fillRect(places.gutterPx, top, places.plotWidthPx, height);
  }
  // Stacked channels all have the same reasons; the first one says them.
  if (place.topPx > places.rows[0]!.audible.topPx) return;
  const whole = wholeBandReason(place.lowHz, place.highHz, unseen);
  if (whole) drawPlate(context, place, scene, whole);
  else drawPartReasons(context, place, scene);
}

function drawPlate(
  context: CanvasRenderingContext2D,
  place: BandPlace,
  { places, colours }: UnseenScene,
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

function drawPartReasons(context: CanvasRenderingContext2D, place: BandPlace, scene: UnseenScene): void {
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
