import type { BandPlace } from '@/composables/bench/frequency-axis.ts';
import { yOfFrequency } from '@/composables/bench/frequency-axis.ts';
import type { StagePlaces } from '@/composables/bench/stage-places.ts';
import { pixelAtSample } from '@/composables/bench/time-axis.ts';
import type { TimeWindow } from '@/composables/bench/time-axis.ts';
import type { Palette } from '@/theme/palette.ts';

/** A mark or a candidate as the picture shows it. */
export interface Fracture {
  key: string;
  startSample: number;
  endSample: number;
  lowHz: number | null;
  highHz: number | null;
  glyph: string;
  kind: 'mark' | 'candidate';
  isSelected: boolean;
  /** Of the selected ones, the one whose span is drawn and whose edges can be taken hold of. */
  isLead: boolean;
}

export interface StagePen {
  context: CanvasRenderingContext2D;
  places: StagePlaces;
  window: TimeWindow;
  colours: Palette;
}

const CORE = '#FFFFFF';
const HALO = 'rgba(4, 10, 14, 0.85)';
const CURSOR_CORE = 'rgba(255, 255, 255, 0.75)';
const CURSOR_HALO = 'rgba(4, 10, 14, 0.35)';
/** A fracture stands this far before its onset, so that it does not cover the burst. */
const BESIDE_PX = 2.5;
const STROKE_PX = 14;
const GLYPH_DISTANCE_PX = 11;
const SERIES_FONT = '14px "Schibsted Grotesk Variable", "DejaVu Sans", sans-serif';

export function xOf(sample: number, { places, window }: Pick<StagePen, 'places' | 'window'>): number {
  return places.gutterPx + pixelAtSample(sample, window, places.plotWidthPx);
}

interface Stroke {
  x: number;
  fromY: number;
  toY: number;
  isDotted: boolean;
  /** The end of a span is drawn lighter than its onset. */
  isEnd?: boolean;
}

/** White core on a dark halo: seen over any colour of any map. */
function strokeLine(
  context: CanvasRenderingContext2D,
  { x, fromY, toY, isDotted, isEnd = false }: Stroke,
): void {
  const at = Math.round(x) + 0.5;
  context.setLineDash(isDotted ? [2, 4] : []);
  for (const [colour, width] of [
    [HALO, isEnd ? 3 : 4],
    [CORE, isEnd ? 1 : 2],
  ] as const) {
    context.strokeStyle = colour;
    context.lineWidth = width;
    context.beginPath();
    context.moveTo(at, fromY);
    context.lineTo(at, toY);
    context.stroke();
  }
  context.setLineDash([]);
}

function drawInBand(pen: StagePen, x: number, place: BandPlace, fracture: Fracture): void {
  const bottom = place.topPx + place.heightPx;
  const isDotted = fracture.kind === 'candidate';
  if (fracture.isSelected) {
    strokeLine(pen.context, { x, fromY: place.topPx, toY: bottom, isDotted });
    return;
  }
  const reach = Math.min(STROKE_PX, place.heightPx / 3);
  strokeLine(pen.context, { x, fromY: place.topPx, toY: place.topPx + reach, isDotted });
  strokeLine(pen.context, { x, fromY: bottom - reach, toY: bottom, isDotted });
}

function drawInWave(pen: StagePen, x: number, fracture: Fracture): void {
  const { context, places, colours } = pen;
  const isCandidate = fracture.kind === 'candidate';
  context.globalAlpha = fracture.isSelected ? 1 : 0.75;
  context.strokeStyle = isCandidate ? colours.inkQuiet : colours.fracture;
  context.lineWidth = fracture.isSelected ? 2 : 1.25;
  context.setLineDash(isCandidate ? [1.5, 3.5] : []);
  context.beginPath();
  context.moveTo(Math.round(x) + 0.5, places.waveTopPx);
  context.lineTo(Math.round(x) + 0.5, places.waveTopPx + places.waveHeightPx);
  context.stroke();
  context.setLineDash([]);
  context.globalAlpha = 1;
}

function isVisible(fracture: Fracture, { window }: StagePen): boolean {
  return fracture.endSample >= window.startSample && fracture.startSample <= window.endSample;
}

/** Marks and candidates through all bands; `fractures` in order of time. */
export function drawFractures(pen: StagePen, fractures: readonly Fracture[]): void {
  const { context, places } = pen;
  context.save();
  context.beginPath();
  context.rect(places.gutterPx, 0, places.plotWidthPx, places.heightPx);
  context.clip();
  const visible = fractures.filter((fracture) => isVisible(fracture, pen));
  let lastGlyphX = Number.NEGATIVE_INFINITY;
  for (const fracture of oneInEachColumn(visible, pen)) {
    lastGlyphX = drawFracture(pen, fracture, lastGlyphX);
  }
  for (const fracture of visible) if (fracture.isSelected) drawChosen(pen, fracture);
  const lead = visible.find(({ isLead }) => isLead);
  if (lead) drawSelected(pen, lead);
  context.restore();
}

/** Ten thousand marks in a thousand columns of pixels are no more than a thousand strokes of each kind. */
function oneInEachColumn(fractures: readonly Fracture[], pen: StagePen): Fracture[] {
  const last = { mark: Number.NaN, candidate: Number.NaN };
  return fractures.filter(({ isSelected, kind, startSample }) => {
    if (isSelected) return false;
    const column = Math.round(xOf(startSample, pen));
    const isNew = column !== last[kind];
    last[kind] = column;
    return isNew;
  });
}

/** One of several that are selected: a full line, with its glyph. */
function drawChosen(pen: StagePen, fracture: Fracture): void {
  if (fracture.isLead) return;
  const onsetX = xOf(fracture.startSample, pen);
  drawInBand(pen, onsetX - BESIDE_PX, pen.places.ultrasonic, fracture);
  drawInBand(pen, onsetX - BESIDE_PX, pen.places.audible, fracture);
  drawInWave(pen, onsetX, fracture);
  drawSpanBar(pen, onsetX, xOf(fracture.endSample, pen));
  if (fracture.kind === 'mark') drawGlyph(pen, onsetX, fracture.glyph, pen.colours.fracture);
}

/** Returns where the last glyph stands: where fractures crowd, not every glyph has room. */
function drawFracture(pen: StagePen, fracture: Fracture, lastGlyphX: number): number {
  const onsetX = xOf(fracture.startSample, pen);
  const x = onsetX - BESIDE_PX;
  drawInBand(pen, x, pen.places.ultrasonic, fracture);
  drawInBand(pen, x, pen.places.audible, fracture);
  drawInWave(pen, onsetX, fracture);
  if (fracture.kind === 'candidate' || onsetX - lastGlyphX < GLYPH_DISTANCE_PX) return lastGlyphX;
  drawGlyph(pen, onsetX, fracture.glyph, pen.colours.ink);
  return onsetX;
}

function drawGlyph({ context, places }: StagePen, x: number, glyph: string, colour: string): void {
  context.font = SERIES_FONT;
  context.fillStyle = colour;
  context.textAlign = 'center';
  context.textBaseline = 'middle';
  context.fillText(glyph, x, places.glyphHeightPx / 2 + 1);
}

function drawSelected(pen: StagePen, fracture: Fracture): void {
  const { context, places, colours } = pen;
  const onsetX = xOf(fracture.startSample, pen);
  const endX = xOf(fracture.endSample, pen);
  context.fillStyle = colours.fracture;
  context.globalAlpha = 0.22;
  context.fillRect(onsetX, places.waveTopPx, Math.max(1, endX - onsetX), places.waveHeightPx);
  context.globalAlpha = 1;
  drawBandBox(pen, fracture, onsetX, endX);
  drawInBand(pen, onsetX - BESIDE_PX, places.ultrasonic, fracture);
  drawInBand(pen, onsetX - BESIDE_PX, places.audible, fracture);
  for (const { topPx, heightPx } of [places.ultrasonic, places.audible]) {
    const x = endX + BESIDE_PX;
    strokeLine(context, { x, fromY: topPx, toY: topPx + heightPx, isDotted: true, isEnd: true });
  }
  drawInWave(pen, onsetX, fracture);
  drawSpanBar(pen, onsetX, endX);
  drawGlyph(pen, onsetX, fracture.kind === 'mark' ? fracture.glyph : '\u00B7', colours.fracture);
}

/** A bar under the glyph, as long as the span; its ends are where the edges are taken hold of. */
function drawSpanBar({ context, places, colours }: StagePen, onsetX: number, endX: number): void {
  context.fillStyle = colours.fracture;
  context.fillRect(onsetX, places.glyphHeightPx - 3, Math.max(2, endX - onsetX), 3);
}

function drawBandBox(pen: StagePen, fracture: Fracture, onsetX: number, endX: number): void {
  const { lowHz, highHz } = fracture;
  if (lowHz === null && highHz === null) return;
  outlineBand(pen, { onsetX, endX, lowHz: lowHz ?? 0, highHz: highHz ?? Number.POSITIVE_INFINITY });
}

interface BandBox {
  onsetX: number;
  endX: number;
  lowHz: number;
  highHz: number;
}

function outlineBand({ context, places }: StagePen, { onsetX, endX, lowHz, highHz }: BandBox): void {
  for (const place of [places.ultrasonic, places.audible]) {
    if (highHz <= place.lowHz || lowHz >= place.highHz) continue;
    const top = yOfFrequency(highHz, place);
    const height = yOfFrequency(lowHz, place) - top;
    context.setLineDash([5, 3]);
    context.lineWidth = 3;
    context.strokeStyle = HALO;
    context.strokeRect(onsetX, top, endX - onsetX, height);
    context.lineWidth = 1.25;
    context.strokeStyle = CORE;
    context.strokeRect(onsetX, top, endX - onsetX, height);
    context.setLineDash([]);
  }
}

export interface DraftBox {
  startSample: number;
  endSample: number;
  lowHz: number | null;
  highHz: number | null;
}

/** A span that was drawn and has no class yet. */
export function drawDraft(pen: StagePen, draft: DraftBox): void {
  const { context, places, colours } = pen;
  const onsetX = xOf(draft.startSample, pen);
  const endX = Math.max(onsetX + 1, xOf(draft.endSample, pen));
  outlineBand(pen, {
    onsetX,
    endX,
    lowHz: draft.lowHz ?? 0,
    highHz: draft.highHz ?? Number.POSITIVE_INFINITY,
  });
  context.globalAlpha = 0.25;
  context.fillStyle = colours.glowFill;
  context.fillRect(onsetX, places.waveTopPx, endX - onsetX, places.waveHeightPx);
  context.globalAlpha = 1;
  context.fillStyle = colours.glowFill;
  context.fillRect(onsetX, places.glyphHeightPx - 3, endX - onsetX, 3);
}

/** Where the next mark would stand: thin, with a triangle in the lane of glyphs. */
export function drawCursor({ context, places, window, colours }: StagePen, sample: number): void {
  const x = Math.round(xOf(sample, { places, window })) + 0.5;
  if (x < places.gutterPx || x > places.gutterPx + places.plotWidthPx) return;
  const bottom = places.waveTopPx + places.waveHeightPx;
  const pictureBottom = Math.max(...places.rows.map((row) => row.topPx + row.heightPx));
  drawHair(
    context,
    x,
    { fromY: places.glyphHeightPx, toY: pictureBottom },
    { core: CURSOR_CORE, halo: CURSOR_HALO },
  );
  drawHair(context, x, { fromY: places.waveTopPx, toY: bottom }, { core: colours.ink, halo: 'transparent' });
  context.fillStyle = colours.ink;
  context.beginPath();
  context.moveTo(x - 4, places.glyphHeightPx - 7);
  context.lineTo(x + 4, places.glyphHeightPx - 7);
  context.lineTo(x, places.glyphHeightPx - 1);
  context.fill();
}

/** What is being heard. */
export function drawPlayhead({ context, places, window, colours }: StagePen, sample: number): void {
  const x = Math.round(xOf(sample, { places, window })) + 0.5;
  if (x < places.gutterPx || x > places.gutterPx + places.plotWidthPx) return;
  const bottom = places.waveTopPx + places.waveHeightPx;
  drawHair(context, x, { fromY: places.glyphHeightPx, toY: bottom }, { core: colours.glowFill, halo: HALO });
}

interface HairLook {
  core: string;
  halo: string;
}

function drawHair(
  context: CanvasRenderingContext2D,
  x: number,
  { fromY, toY }: { fromY: number; toY: number },
  { core, halo }: HairLook,
): void {
  for (const [colour, width] of [
    [halo, 3],
    [core, 1],
  ] as const) {
    context.strokeStyle = colour;
    context.lineWidth = width;
    context.beginPath();
    context.moveTo(x, fromY);
    context.lineTo(x, toY);
    context.stroke();
  }
}
