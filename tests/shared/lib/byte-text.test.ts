import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { asciiText, decodeText } from '../../../shared/lib/byte-text.ts';

describe('text of unknown encoding', () => {
  it('any text without NUL in UTF-8 comes back', () => {
    const text = fc
      .string({ unit: 'grapheme' })
      .filter((value) => !value.includes('\0') && !value.startsWith('\ufeff'));
    fc.assert(
      fc.property(text, (value) => {
        expect(decodeText(new TextEncoder().encode(value))).toBe(value);
      }),
      { seed: 5 },
    );
  });

  it('any bytes give the text that a strict UTF-8 decoder gives, or Latin-1 where that refuses', () => {
    fc.assert(
      fc.property(fc.uint8Array({ maxLength: 12 }), (bytes) => {
        const isMarked = (bytes[0] ?? 0) >= 0xef && [0xbb, 0xfe, 0xff].includes(bytes[1] ?? 0);
        fc.pre(!isMarked && !bytes.includes(0));
        let expected: string;
        try {
          expected = new TextDecoder('utf-8', { fatal: true }).decode(bytes);
        } catch {
          expected = String.fromCharCode(...bytes);
        }
        expect(decodeText(bytes)).toBe(expected);
      }),
      { numRuns: 2000, seed: 6 },
    );
  });

  it('Latin-1, UTF-16 of both orders and a marked UTF-8 are told apart', () => {
    expect(decodeText(Uint8Array.from([0x5a, 0xfc, 0x67]))).toBe('Züg');
    expect(decodeText(Uint8Array.from([0xff, 0xfe, 0x41, 0x00, 0xfc, 0x00]))).toBe('Aü');
    expect(decodeText(Uint8Array.from([0xfe, 0xff, 0x00, 0x41, 0x00, 0xfc]))).toBe('Aü');
    expect(decodeText(Uint8Array.from([0xef, 0xbb, 0xbf, 0x41]))).toBe('A');
  });

  it('a text ends at its first NUL', () => {
    expect(decodeText(Uint8Array.from([0x41, 0, 0x42]))).toBe('A');
  });
});

it('a chunk id shows a question mark for what cannot be printed', () => {
  expect(asciiText(Uint8Array.from([0x64, 0x00, 0xff, 0x20]), 0, 4)).toBe('d?? ');
  expect(asciiText(new Uint8Array(0), 0, 2)).toBe('??');
});
