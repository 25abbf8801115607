import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { spanFault } from '@shared/domain/event-span.ts';
import { fittedShift, movedSpan } from '@/composables/bench/marking/mark-edits.ts';
import { markRoom } from '@/composables/pass/mark-room.ts';

const frames = 10_000;
const windows = [
  { startSample: 1000, endSample: 2000 },
  { startSample: 2000, endSample: 2500 },
  { startSample: 6000, endSample: 7000 },
];
const room = markRoom(windows, frames);
const mark = fc
  .tuple(fc.constantFrom(...windows), fc.double({ min: 0, max: 1, noNaN: true }), fc.nat(3000))
  .map(([window, share, length]) => {
    const last = window.endSample - window.startSample - 1;
    const startSample = window.startSample + Math.floor(share * last);
    return { startSample, endSample: startSample + 1 + length };
  });
const part = fc.constantFrom('start' as const, 'end' as const, 'whole' as const);
const shift = fc.integer({ min: -2 * frames, max: 2 * frames });

describe('a mark in a pass of windows', () => {
  it('begins inside a window, and in the one it began in, however far it is moved', () => {
    fc.assert(
      fc.property(mark, part, shift, (given, what, samples) => {
        const around = room.around(given.startSample);
        const moved = movedSpan(given, what, samples, frames, around);
        expect(spanFault(moved, frames)).toBeNull();
        expect(room.isOutside(moved.startSample)).toBe(false);
        expect(room.around(moved.startSample)).toEqual(around);
      }),
    );
  });

  it('stops at the edge of its window, and its end may lie beyond', () => {
    const given = { startSample: 1900, endSample: 2100 };
    const around = room.around(1900);
    expect(movedSpan(given, 'start', 150, frames, around)).toEqual({ startSample: 1999, endSample: 2100 });
    expect(movedSpan(given, 'start', -5000, frames, around).startSample).toBe(1000);
    expect(movedSpan(given, 'whole', 150, frames, around)).toEqual({ startSample: 1999, endSample: 2199 });
    expect(movedSpan(given, 'end', 5000, frames, around).endSample).toBe(7100);
  });

  it('takes several along only as far as the first of them can go', () => {
    const given = [
      { startSample: 1100, endSample: 1200 },
      { startSample: 6010, endSample: 6100 },
    ];
    expect(fittedShift(given, -500, frames, room.around)).toBe(-10);
    expect(fittedShift(given, -500, frames)).toBe(-500);
  });

  it('is refused at a place in no window, and nowhere in a pass of the whole recording', () => {
    expect([999, 1000, 1999.4, 2499, 2500, 6500].map(room.isOutside)).toEqual([
      true,
      false,
      false,
      false,
      true,
      false,
    ]);
    const whole = markRoom(null, frames);
    expect(whole.isOutside(2500)).toBe(false);
    expect(whole.around(2500)).toEqual({ startSample: 0, endSample: frames });
  });
});
