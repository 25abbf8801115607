import { describe, expect, it } from 'vitest';
import { contrastRatio } from '@/theme/colour.ts';
import { GRAPHIC_PAIRS, palettes, phaseColours, TEXT_PAIRS } from '@/theme/palette.ts';
import type { ThemeName } from '@/theme/palette.ts';
import { themeStyleSheet } from '@/theme/tokens.ts';

const themes: ThemeName[] = ['light', 'dark'];

describe('contrast ratio', () => {
  it('is 21 between black and white', () => {
    // Source: WCAG 2.2, definition of contrast ratio: from 1 to 21.
    expect(contrastRatio('#000000', '#FFFFFF')).toBeCloseTo(21, 6);
  });

  it('is 4.48 for grey 777777 on white', () => {
    // Source: published example of the ratio that just misses AA; from memory.
    expect(contrastRatio('#777777', '#FFFFFF')).toBeCloseTo(4.48, 2);
  });

  it('is the same in both directions', () => {
    expect(contrastRatio('#0B6B75', '#F4F7F8')).toBe(contrastRatio('#F4F7F8', '#0B6B75'));
  });
});

describe.each(themes)('the %s theme', (theme) => {
  const palette = palettes[theme];

  it.each(TEXT_PAIRS)('sets %s on %s with at least 4.5 to 1', (text, ground) => {
    expect(contrastRatio(palette[text], palette[ground])).toBeGreaterThanOrEqual(4.5);
  });

  it.each(GRAPHIC_PAIRS)('draws %s on %s with at least 3 to 1', (line, ground) => {
    expect(contrastRatio(palette[line], palette[ground])).toBeGreaterThanOrEqual(3);
  });

  it('gives every colour as a custom property', () => {
    const sheet = themeStyleSheet();
    for (const colour of Object.values(palette)) expect(sheet).toContain(colour);
    expect(sheet).toContain('--ink-quiet:');
  });
});

describe('growth phases', () => {
  it.each(Object.entries(phaseColours))('%s carries its name with at least 4.5 to 1', (_, { fill, text }) => {
    expect(contrastRatio(fill, text)).toBeGreaterThanOrEqual(4.5);
  });
});
