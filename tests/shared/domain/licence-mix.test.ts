import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { licenceSchema } from '../../../shared/contract/licence.ts';
import {
  allowedWholeLicences,
  licenceIds,
  licenceMixRefusal,
  licences,
} from '../../../shared/domain/licence-mix.ts';

describe('licence mix', () => {
  it('knows exactly the licences a lab may grant', () => {
    expect([...licenceIds].sort()).toEqual([...licenceSchema.options].sort());
    for (const id of licenceIds) expect(licences[id].url).toMatch(/^https:\/\//);
  });

  it('lets a release of public-domain recordings carry any licence', () => {
    expect(allowedWholeLicences(['CC0-1.0'])).toEqual(licenceIds);
  });

  it('refuses a whole that is looser than a member and names the member', () => {
    expect(licenceMixRefusal(['CC0-1.0', 'CC-BY-4.0'], 'CC0-1.0')).toMatch(/looser than CC-BY-4\.0/);
    expect(licenceMixRefusal(['CC-BY-4.0', 'CC-BY-NC-4.0'], 'CC-BY-4.0')).toMatch(
      /looser than CC-BY-NC-4\.0/,
    );
    expect(licenceMixRefusal(['CC-BY-4.0', 'CC-BY-SA-4.0'], 'CC-BY-4.0')).toMatch(/can carry CC-BY-SA-4\.0/);
  });

  it('carries the terms of the most demanding member', () => {
    expect(allowedWholeLicences(['CC-BY-4.0', 'CC-BY-SA-4.0'])).toEqual(['CC-BY-SA-4.0']);
    expect(allowedWholeLicences(['CC0-1.0', 'CC-BY-NC-4.0', 'CC-BY-4.0'])).toEqual(['CC-BY-NC-4.0']);
    expect(allowedWholeLicences(['ODC-By-1.0', 'ODbL-1.0'])).toEqual(['ODbL-1.0']);
  });

  it.each([
    ['CC-BY-SA-4.0', 'ODbL-1.0'],
    ['CC-BY-SA-4.0', 'CC-BY-NC-4.0'],
    ['CC-BY-NC-4.0', 'ODbL-1.0'],
  ] as const)('refuses %s together with %s, whatever the whole', (first, second) => {
    expect(allowedWholeLicences([first, second])).toEqual([]);
    for (const whole of licenceIds) {
      expect(licenceMixRefusal([first, second], whole)).toContain(`${first} and ${second}`);
    }
  });

  it('never allows more when a member is added', () => {
    const members = fc.array(fc.constantFrom(...licenceIds), { minLength: 1, maxLength: 6 });
    fc.assert(
      fc.property(members, fc.constantFrom(...licenceIds), (some, more) => {
        const before = allowedWholeLicences(some);
        expect(before).toEqual(expect.arrayContaining(allowedWholeLicences([...some, more])));
      }),
    );
  });
});
