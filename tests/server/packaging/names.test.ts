import { describe, expect, it } from 'vitest';
import { nameProblems } from '../../../server/packaging/names.ts';

describe('names in archives', () => {
  it('accepts the paths a release has', () => {
    expect(
      nameProblems(['ice-1.0.0/data/audio/01890000-0000-7000-8000-000000000000.wav', 'a/bagit.txt']),
    ).toEqual([]);
  });

  it.each([
    ['/etc/passwd', 'absolute'],
    ['C:/x', 'absolute'],
    ['a/../../x', 'leads out'],
    ['./a', 'leads out'],
    ['a//b', 'empty part'],
    ['a/', 'empty part'],
    ['a/.hidden', 'not safe'],
    ['-rf', 'not safe'],
    ['~/a', 'not safe'],
    ['a\\b', 'not safe'],
    ['a b', 'not safe'],
    ['schnee-é', 'not safe'],
    ['a.', 'not safe'],
    ['a\u0000', 'not safe'],
    ['nul.txt', 'Windows'],
    ['x'.repeat(101), 'longer'],
    ['data/test/a.wav', 'split'],
    ['ice-train-1.0.0', 'split'],
  ])('refuses %j', (path, why) => {
    expect(nameProblems([path]).join()).toContain(why);
  });

  it('refuses names that fold together, and doubles', () => {
    expect(nameProblems(['a/Run.csv', 'a/run.csv']).join()).toContain('one file');
    expect(nameProblems(['a/b', 'a/b']).join()).toContain('twice');
    const composed = 'data/caf\u00e9';
    const decomposed = 'data/cafe\u0301';
    expect(nameProblems([composed, decomposed]).join()).toContain('one file');
  });
});
