import { describe, expect, it } from 'vitest';
import { labToRgb, parseHex, rgbToLab } from '@/theme/colour.ts';
import type { Rgb } from '@/theme/colour.ts';
import { COLOUR_STEPS, colourMaps, colourMapSteps, colourMapTable } from '@/theme/colour-maps.ts';
import type { ColourMapName } from '@/theme/colour-maps.ts';

const names = Object.keys(colourMaps) as ColourMapName[];

function lightnessOf(name: ColourMapName): number[] {
  return colourMapSteps(name).map((rgb) => rgbToLab(rgb)[0]);
}

/**
 * Full dichromacy in linear RGB. Source: Vienot, Brettel and Mollon 1999, Digital video colourmaps for checking the
 * legibility of displays by dichromats; matrices as widely reprinted, from memory.
 */
const dichromats: Record<string, readonly Rgb[]> = {
  protanopia: [
    [0.11238, 0.88762, 0],
    [0.11238, 0.88762, -0],
    [0.00401, -0.00401, 1],
  ],
  deuteranopia: [
    [0.29275, 0.70725, 0],
    [0.29275, 0.70725, -0],
    [-0.02234, 0.02234, 1],
  ],
};

function toLinear(channel: number): number {
  const share = channel / 255;
  return share <= 0.04045 ? share / 12.92 : ((share + 0.055) / 1.055) ** 2.4;
}

function luminanceSeenBy(matrix: readonly Rgb[], rgb: Rgb): number {
  const linear = rgb.map(toLinear);
  const seen = matrix.map((row) => row.reduce((sum, weight, axis) => sum + weight * (linear[axis] ?? 0), 0));
  return 0.2126 * (seen[0] ?? 0) + 0.7152 * (seen[1] ?? 0) + 0.0722 * (seen[2] ?? 0);
}

describe('CIE L*a*b*', () => {
  it('puts white at lightness 100 without colour', () => {
    const [lightness, a, b] = rgbToLab([255, 255, 255]);
    expect(lightness).toBeCloseTo(100, 3);
    expect(Math.hypot(a, b)).toBeLessThan(0.02);
  });

  it('puts sRGB red at 53.24, 80.09, 67.20', () => {
    // Source: B. Lindbloom, colour calculator, sRGB red under D65; from memory.
    const [lightness, a, b] = rgbToLab([255, 0, 0]);
    expect(lightness).toBeCloseTo(53.24, 1);
    expect(a).toBeCloseTo(80.09, 1);
    expect(b).toBeCloseTo(67.2, 1);
  });

  it('comes back to the same sRGB', () => {
    const rgb = parseHex('#0B6B75');
    expect(labToRgb(rgbToLab(rgb))).toEqual(rgb);
  });
});

describe.each(names)('the %s map', (name) => {
  it('has 256 steps from its first anchor to its last', () => {
    const steps = colourMapSteps(name);
    expect(steps).toHaveLength(COLOUR_STEPS);
    expect(steps[0]).toEqual(parseHex(colourMaps[name].anchors[0] ?? ''));
    expect(steps.at(-1)).toEqual(parseHex(colourMaps[name].anchors.at(-1) ?? ''));
  });

  it('grows lighter with every step, but for rounding to 8 bits', () => {
    const lightness = lightnessOf(name);
    const steps = lightness.slice(1).map((value, index) => value - (lightness[index] ?? 0));
    expect(Math.min(...steps)).toBeGreaterThan(-0.3);
    for (let start = 0; start + 8 < COLOUR_STEPS; start += 1) {
      expect(lightness[start + 8]).toBeGreaterThan(lightness[start] ?? 0);
    }
  });

  it.each(Object.keys(dichromats))('still grows lighter with %s', (kind) => {
    const seen = colourMapSteps(name).map((rgb) => luminanceSeenBy(dichromats[kind] ?? [], rgb));
    for (let start = 0; start + 16 < COLOUR_STEPS; start += 16) {
      expect(seen[start + 16]).toBeGreaterThan(seen[start] ?? 0);
    }
  });

  it('is opaque in its table, with red in the lowest byte', () => {
    const [red, green, blue] = colourMapSteps(name)[200] ?? [0, 0, 0];
    const pixel = colourMapTable(name)[200] ?? 0;
    expect([pixel & 255, (pixel >>> 8) & 255, (pixel >>> 16) & 255, pixel >>> 24]).toEqual([
      red,
      green,
      blue,
      255,
    ]);
  });
});

describe('our own map', () => {
  it('is even: a quarter of the way is a quarter of the lightness', () => {
    const lightness = lightnessOf('frost');
    const [first = 0, last = 0] = [lightness[0], lightness.at(-1)];
    for (const share of [0.25, 0.5, 0.75]) {
      const expected = first + (last - first) * share;
      expect(Math.abs((lightness[Math.round(share * 255)] ?? 0) - expected)).toBeLessThan(1);
    }
  });
});
