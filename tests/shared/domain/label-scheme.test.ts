import { describe, expect, it } from 'vitest';
import { labelSchemeV1, voiceClassKey } from '../../../shared/domain/label-scheme.ts';

describe('the first label scheme', () => {
  it('gives every class a key, a glyph of its own and a definition', () => {
    expect(new Set(labelSchemeV1.map((item) => item.key)).size).toBe(labelSchemeV1.length);
    expect(new Set(labelSchemeV1.map((item) => item.glyph)).size).toBe(labelSchemeV1.length);
    for (const item of labelSchemeV1) expect(item.definition.length).toBeGreaterThan(20);
  });

  it('has the class that holds a recording', () => {
    expect(labelSchemeV1.some((item) => item.key === voiceClassKey)).toBe(true);
  });
});
