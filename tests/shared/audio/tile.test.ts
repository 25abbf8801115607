import { describe, expect, it } from 'vitest';
import { decodeTile, encodeTile, TILE_HEADER_BYTES, type Tile } from '../../../shared/audio/tile.ts';

const tile: Tile = {
  bins: 3,
  columns: 2,
  samplesPerColumn: 512,
  startSample: 2 ** 40,
  lowHz: 20_000,
  highHz: 96_000,
  minimumDb: -120,
  dbPerCode: 0.5,
  codes: Uint8Array.from([1, 2, 3, 4, 5, 255]),
};

describe('a tile', () => {
  it('comes back as it was put in, from any place in a larger buffer', () => {
    const bytes = encodeTile(tile);
    const shifted = new Uint8Array(bytes.length + 7);
    shifted.set(bytes, 7);
    expect(decodeTile(shifted.subarray(7))).toEqual(tile);
  });

  it('begins with "RCT1", version 1, bins and columns in little endian', () => {
    const bytes = encodeTile(tile);
    expect(String.fromCharCode(...bytes.subarray(0, 4))).toBe('RCT1');
    expect([...bytes.subarray(4, 16)]).toEqual([1, 0, 3, 0, 2, 0, 0, 0, 0, 2, 0, 0]);
    expect(bytes.length).toBe(TILE_HEADER_BYTES + 6);
  });

  it('is refused when codes and size differ', () => {
    expect(() => encodeTile({ ...tile, columns: 3 })).toThrow(RangeError);
  });

  it('is refused when cut short, of another kind or of another version', () => {
    const bytes = encodeTile(tile);
    expect(() => decodeTile(bytes.subarray(0, 20))).toThrow(/too few/);
    expect(() => decodeTile(bytes.subarray(0, bytes.length - 1))).toThrow(/expected/);
    expect(() => decodeTile(bytes.map((byte, i) => (i === 0 ? 0 : byte)))).toThrow(/RCT1/);
    expect(() => decodeTile(bytes.map((byte, i) => (i === 4 ? 2 : byte)))).toThrow(/version 2/);
  });
});
