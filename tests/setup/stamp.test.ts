import { mkdirSync, mkdtempSync, renameSync, rmSync, utimesSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import path from 'node:path';
import { afterEach, beforeEach, describe, expect, it } from 'vitest';
import { clearStamp, hashOfSources, readStamp, writeStamp } from '../../server/setup/stamp.mjs';

let root: string;

beforeEach(() => {
  root = mkdtempSync(path.join(tmpdir(), 'recalesce-stamp-'));
  mkdirSync(path.join(root, 'src/deep'), { recursive: true });
  writeFileSync(path.join(root, 'src/a.ts'), 'a');
  writeFileSync(path.join(root, 'src/deep/b.ts'), 'b');
  writeFileSync(path.join(root, 'index.html'), 'page');
});

afterEach(() => {
  rmSync(root, { recursive: true, force: true });
});

const hash = (facts: string[] = []) => hashOfSources(root, ['src', 'index.html', 'missing'], facts);

describe('the hash of sources', () => {
  it('stays when only a time stamp changes', () => {
    const before = hash();
    utimesSync(path.join(root, 'src/a.ts'), 1, 1);
    expect(hash()).toBe(before);
  });

  it('changes when a file deep inside changes', () => {
    const before = hash();
    writeFileSync(path.join(root, 'src/deep/b.ts'), 'B');
    expect(hash()).not.toBe(before);
  });

  it('changes when a file is renamed', () => {
    const before = hash();
    renameSync(path.join(root, 'src/a.ts'), path.join(root, 'src/c.ts'));
    expect(hash()).not.toBe(before);
  });

  it('changes when text moves from one file to the next', () => {
    const before = hash();
    writeFileSync(path.join(root, 'src/a.ts'), '');
    writeFileSync(path.join(root, 'src/deep/b.ts'), 'ab');
    expect(hash()).not.toBe(before);
  });

  it('changes with a fact, such as the version of Node.js', () => {
    expect(hash(['115'])).not.toBe(hash(['127']));
  });
});

describe('a stamp', () => {
  it('is read as it was written and is gone when cleared', () => {
    const file = path.join(root, 'dist/.client-stamp');
    expect(readStamp(file)).toBeUndefined();
    writeStamp(file, 'abc');
    expect(readStamp(file)).toBe('abc');
    clearStamp(file);
    expect(readStamp(file)).toBeUndefined();
  });
});
