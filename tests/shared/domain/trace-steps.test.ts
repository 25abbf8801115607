import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { clockFromMarks, runTimeNsOf, traceSOf } from '../../../shared/domain/trace-clock.ts';
import { temperatureUnitOf, toCelsius } from '../../../shared/domain/temperature-unit.ts';
import { fewerPoints } from '../../../shared/domain/trace-steps.ts';

describe('fewer points of a trace', () => {
  test('keep a spike of a single point', () => {
    const timesS = Float64Array.from({ length: 100_000 }, (_, n) => n / 10);
    const values = timesS.map((timeS) => Math.sin(timeS / 50));
    values[77_777] = 40;
    const fewer = fewerPoints({ timesS, values }, 4000);
    expect(fewer.timesS.length).toBeLessThanOrEqual(4000);
    expect([...fewer.values]).toContain(40);
  });

  test('are in order, are points of the trace, and keep its least and greatest value', () => {
    const steps = fc.array(
      fc.tuple(fc.double({ min: 0, max: 5, noNaN: true }), fc.double({ min: -1e3, max: 1e3, noNaN: true })),
      { minLength: 1, maxLength: 400 },
    );
    fc.assert(
      fc.property(steps, fc.integer({ min: 2, max: 60 }), (pairs, most) => {
        let timeS = 0;
        const timesS = Float64Array.from(pairs, ([stepS]) => (timeS += stepS));
        const values = Float64Array.from(pairs, ([, value]) => value);
        const fewer = fewerPoints({ timesS, values }, most);
        const known = new Set(pairs.map(([, value], n) => `${timesS[n]} ${value}`));
        expect(fewer.timesS.length).toBeLessThanOrEqual(most);
        expect([...fewer.timesS]).toEqual([...fewer.timesS].sort((a, b) => a - b));
        expect(fewer.values.every((value, n) => known.has(`${fewer.timesS[n]} ${value}`))).toBe(true);
        expect(Math.max(...fewer.values)).toBe(Math.max(...values));
        expect(Math.min(...fewer.values)).toBe(Math.min(...values));
      }),
      { seed: 46 },
    );
  });
});

describe('the clock of a trace', () => {
  test('comes from one instant, or with its drift from two', () => {
    expect(clockFromMarks({ traceS: 12.5, runTimeNs: 10e9 }, null)).toEqual({
      runOffsetNs: -2.5e9,
      clockPpm: 0,
    });
    const clock = clockFromMarks({ traceS: 100, runTimeNs: 0 }, { traceS: 1100.02, runTimeNs: 1000e9 });
    expect(clock).toMatchObject({ clockPpm: expect.closeTo(20, 6) });
    expect(typeof clock === 'string' ? clock : runTimeNsOf(1100.02, clock)).toBeCloseTo(1000e9, -1);
  });

  test('is refused in words where two instants contradict each other', () => {
    const first = { traceS: 0, runTimeNs: 0 };
    expect(clockFromMarks(first, first)).toBe('The two instants have to lie apart.');
    expect(clockFromMarks(first, { traceS: 5, runTimeNs: -5e9 })).toContain('another order');
    expect(clockFromMarks(first, { traceS: 11, runTimeNs: 10e9 })).toContain('off by 10 %');
  });

  test('goes there and back', () => {
    const clocks = fc.record({
      runOffsetNs: fc.integer({ min: -1e12, max: 1e12 }),
      clockPpm: fc.double({ min: -1e4, max: 1e4, noNaN: true }),
    });
    fc.assert(
      fc.property(clocks, fc.double({ min: 0, max: 1e5, noNaN: true }), (clock, traceS) => {
        expect(traceSOf(runTimeNsOf(traceS, clock), clock)).toBeCloseTo(traceS, 6);
      }),
      { seed: 47 },
    );
  });
});

describe('temperatures', () => {
  test('are known by the units that people write', () => {
    expect(['°C', 'deg C', 'c', 'K', 'kelvin', '°F', 'V', ''].map(temperatureUnitOf)).toEqual([
      '°C',
      '°C',
      '°C',
      'K',
      'K',
      '°F',
      null,
      null,
    ]);
    expect([toCelsius(273.15, 'K'), toCelsius(212, '°F'), toCelsius(-3, '°C')]).toEqual([0, 100, -3]);
  });
});
