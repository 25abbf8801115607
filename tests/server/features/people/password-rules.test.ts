import { describe, expect, test } from 'vitest';
import { requireUncommonPassword } from '../../../../server/features/people/password-rules.ts';

const owner = { email: 'noor.halvorsen@lab.example', name: 'Noor Halvorsen' };

describe('a password', () => {
  test.each([
    'qwertyuiop123',
    'passwordpassword',
    '123456789012',
    'aaaaaaaaaaaa',
    'abcabcabcabc',
    'abcdefghijkl',
    'lkjhgfdsapoiuytrewq',
    'Password12345!',
    '2031password2031',
    'letmeinletmein',
  ])('that is tried first is refused: %s', (password) => {
    expect(() => requireUncommonPassword(password, owner)).toThrow(/tried first/);
  });

  test.each(['noorhalvorsen', 'Halvorsen2031!', 'recalesce-recalesce', 'Noor.Halvorsen.12'])(
    'made from the owner or the service is refused: %s',
    (password) => {
      expect(() => requireUncommonPassword(password, owner)).toThrow(/must not be made from/);
    },
  );

  test.each([
    'slow copper rain window',
    ' leading and trailing ',
    'halvorsen likes quiet lanterns',
    'пять тихих фонарей',
    'Ωρα για καφέ τώρα',
    'x7#qLm2vT9$k',
    '🌊🧊🌊🔔🕯🌊🧊🔔🌊🕯🪨🌊',
  ])('of any characters is taken: %s', (password) => {
    expect(() => requireUncommonPassword(password, owner)).not.toThrow();
  });
});
