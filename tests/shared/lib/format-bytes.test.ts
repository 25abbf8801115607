import { expect, it } from 'vitest';
import { formatBytes } from '../../../shared/lib/format-bytes.ts';

it.each([
  [0, '0 B'],
  [999, '999 B'],
  [1500, '1.5 kB'],
  [12_400_000, '12 MB'],
  [999_600, '1.0 MB'],
  [6_000_000_000, '6.0 GB'],
])('%d bytes are written as %s', (sizeBytes, text) => {
  expect(formatBytes(sizeBytes)).toBe(text);
});

it('a negative size is an error', () => {
  expect(() => formatBytes(-1)).toThrow(RangeError);
});
