import type { CourseTracker } from './course.ts';
import type { ChannelPassSettings } from './channel-pass.ts';
import { FrameCursor, type SampleWindow } from './frame-cursor.ts';
import type { ShortFrameRows } from './frame-engine.ts';
import { SHORT_FRAMES_AT_ONCE } from './pass-arithmetic.ts';
import { framesPerColumn, PictureColumns } from './picture-columns.ts';

/** Lines above the hearing line of one short frame: `power[offset + k - first]` is line k, `first` to `end - 1`. */
export interface ShortFrame {
  index: number;
  power: Float32Array;
  offset: number;
  first: number;
  end: number;
}

/** Takes every short frame in order; the frame is reused. */
export type ShortFrameSink = (frame: ShortFrame) => void;

/** Short frames of a segment: ultrasonic picture, course above 20 kHz, and whoever else looks at them. */
export class ShortFrames {
  readonly #cursor: FrameCursor;
  readonly #rows: ShortFrameRows;
  readonly #picture: PictureColumns | undefined;
  readonly #course: CourseTracker;
  readonly #sink: ShortFrameSink | undefined;
  readonly #frame: ShortFrame;
  readonly #hop: number;

  constructor(settings: ChannelPassSettings, rows: ShortFrameRows, course: CourseTracker) {
    const { plan, pictures, segment } = settings;
    this.#cursor = new FrameCursor(
      plan.short,
      plan.frames,
      segment,
      SHORT_FRAMES_AT_ONCE,
      framesPerColumn('ultrasonic'),
    );
    this.#rows = rows;
    const picture = pictures.find(({ layout }) => layout.band === 'ultrasonic');
    this.#picture = picture && new PictureColumns(picture, settings);
    this.#course = course;
    this.#sink = settings.shortFrame;
    this.#hop = plan.short.hop;
    const { firstBin: first, bins } = rows;
    this.#frame = { index: 0, power: rows.power, offset: 0, first, end: first + bins };
  }

  advance(window: SampleWindow): void {
    const rows = this.#rows;
    for (let run = this.#cursor.take(window); run !== undefined; run = this.#cursor.take(window)) {
      rows.analyse(window, run.first, run.end);
      this.#picture?.push(rows, run.end - run.first);
      this.#handOn(run.first, run.end - run.first);
    }
  }

  finish(): void {
    this.#picture?.finish();
  }

  #handOn(firstIndex: number, count: number): void {
    const { meanSquares, power, powerStride } = this.#rows;
    const frame = this.#frame;
    frame.power = power;
    for (let row = 0; row < count; row++) {
      frame.index = firstIndex + row;
      frame.offset = row * powerStride;
      this.#course.pushUltrasonic((frame.index + 0.5) * this.#hop, meanSquares[row]!);
      this.#sink?.(frame);
    }
  }
}
