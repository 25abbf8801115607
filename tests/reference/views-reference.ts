import type { ViewValues } from '../support/view-accuracy.ts';
import kept from './views.json' with { type: 'json' };

export const VIEWS_RATE_HZ = 192_000;
const SAMPLES = 263_123;
const CLICKS = [
  [9_000, 4],
  [21_000, 38],
  [21_300, 7],
  [140_000, 3],
  [262_000, 24],
] as const;
const FULL_SCALE = 2 ** 23;

/** Samples whose 24-bit codes are whole: the same as in views.py. */
export function makeViewsSignal(): Float32Array {
  let state = 12345;
  return Float32Array.from({ length: SAMPLES }, (_, n) => {
    state = (Math.imul(1664525, state) + 1013904223) >>> 0;
    let code = (state >>> 16) - 32768 + 40 * Math.abs(2 * (n % 3840) - 3840) - 76_800;
    for (const [onset, period] of CLICKS) {
      if (n < onset) continue;
      const height = (2 ** 21) >> Math.min(30, Math.floor((n - onset) / 64));
      code += (n - onset) % period < Math.floor(period / 2) ? height : -height;
    }
    return code / FULL_SCALE;
  });
}

function bytesOf(text: string): Uint8Array<ArrayBuffer> {
  return Uint8Array.from(Buffer.from(text, 'base64'));
}

/** By numpy in float64; the rows are kept in float32. */
export const viewsReference: ViewValues = {
  columns: kept.columns,
  frames: new Float32Array(bytesOf(kept.frames).buffer),
  audible: bytesOf(kept.audible),
  ultrasonic: bytesOf(kept.ultrasonic),
  peaks: new Float32Array(bytesOf(kept.peaks).buffer),
};
