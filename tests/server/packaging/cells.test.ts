import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import {
  freeText,
  integerText,
  numberText,
  oneLine,
  secondsText,
  unguarded,
} from '../../../server/packaging/cells.ts';

describe('cells', () => {
  it('derives seconds with nine digits from whole samples', () => {
    expect(secondsText(0, 48_000)).toBe('0.000000000');
    expect(secondsText(1, 1_000_000)).toBe('0.000001000');
    expect(secondsText(1, 3)).toBe('0.333333333');
    expect(secondsText(2, 3)).toBe('0.666666667');
    expect(secondsText(Number.MAX_SAFE_INTEGER, 192_000)).toBe('46912496118.442661458');
  });

  it('gives seconds from which the sample comes back, at every usual rate', () => {
    const rates = fc.constantFrom(44_100, 48_000, 192_000, 500_000, 1_000_000, 10_000_000);
    fc.assert(
      fc.property(fc.integer({ min: 0, max: 2 ** 33 }), rates, (samples, rate) => {
        expect(Math.round(Number(secondsText(samples, rate)) * rate)).toBe(samples);
      }),
    );
  });

  it('writes numbers so that the same double is read back, in the grammar of Table Schema', () => {
    fc.assert(
      fc.property(fc.double({ noNaN: true, noDefaultInfinity: true }), (value) => {
        const text = numberText(value);
        expect(text).toMatch(/^-?\d+(\.\d+)?(E[+-]\d+)?$/);
        expect(Number(text)).toBe(value === 0 ? 0 : value);
      }),
    );
  });

  it('refuses what cannot be written exactly', () => {
    expect(() => numberText(Number.NaN)).toThrow();
    expect(() => numberText(Number.POSITIVE_INFINITY)).toThrow();
    expect(() => integerText(1.5)).toThrow();
    expect(() => integerText(2 ** 53)).toThrow();
    expect(integerText(-0)).toBe('0');
  });

  // CWE-1236; OWASP ASVS 5.0 1.2.10 names = + - @ and tab (from memory).
  it.each(['=1+1', '+1', '-1', '@SUM(A1)', '\t=1', '\n=1', '  =1', '＝1', "'quoted"])(
    'guards %j and gives it back',
    (text) => {
      expect(freeText(text)).toBe(`'${text}`);
      expect(unguarded(freeText(text))).toBe(text);
    },
  );

  it('gives every text back that has no control characters', () => {
    fc.assert(
      fc.property(fc.string({ unit: 'grapheme' }), (text) => {
        const clean = text.replace(/\r\n?/g, '\n').replace(/[^\P{Cc}\n\t]/gu, '');
        expect(unguarded(freeText(text))).toBe(clean);
        expect(freeText(text)).not.toMatch(/^[=+\-@\t\r\n]/);
      }),
    );
  });

  it('leaves ordinary text alone and takes out control characters', () => {
    expect(freeText('a = b')).toBe('a = b');
    expect(freeText('a\r\nb\u0000c')).toBe('a\nbc');
    expect(oneLine('a\n  b\tc\u0007 ')).toBe('a b c');
  });
});
