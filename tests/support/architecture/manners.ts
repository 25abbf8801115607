import type { SourceFile } from './source-file.ts';

const longestFileLines = 300;

export function findLongFiles(files: SourceFile[]): string[] {
  return files
    .map(({ path, text }) => ({ path, lines: text.split('\n').length - 1 }))
    .filter(({ lines }) => lines > longestFileLines)
    .map(({ path, lines }) => `${path} has ${lines} lines`);
}

/** Files that hand on what others of ours export: every name is imported from where it is defined. */
export function findBarrels(files: SourceFile[]): string[] {
  const handsOn = /^export\s+(type\s+)?(\*[^;'"]*|\{[^}]*\})\s+from\s+['"](\.|@\/|@shared\/)/m;
  return files.filter(({ text }) => handsOn.test(text)).map(({ path }) => path);
}

/** Names that say nothing about what is inside. */
export function findEmptyNames(files: SourceFile[]): string[] {
  return files
    .map(({ path }) => path)
    .filter((path) => /(^|[/.])(utils?|helpers?|types|common|misc)\.ts$/.test(path));
}

// In two halves, so that this list does not find itself.
const unwanted = [
  ['TO', 'DO'],
  ['FIX', 'ME'],
  ['XX', 'X'],
  ['@ts-', 'ignore'],
  ['@ts-', 'nocheck'],
  ['eslint-', 'disable'],
  ['prettier-', 'ignore'],
  ['as ', 'any'],
  ['it.', 'only('],
  ['test.', 'only('],
  ['describe.', 'only('],
  ['it.', 'skip('],
  ['test.', 'skip('],
  ['describe.', 'skip('],
  ['/wo', 'rk/'],
  ['/tm', 'p/'],
  ['registry.', 'npmjs'],
  ['lorem ', 'ipsum'],
].map((halves) => halves.join(''));

function occurs(word: string, text: string): boolean {
  const escaped = word.replace(/[.*+?^${}()|[\]\\/]/g, '\\$&');
  return new RegExp(`(?<![A-Za-z])${escaped}(?![A-Za-z])`).test(text);
}

/** Words of unfinished work, of switched-off checks, and of one machine's folders. */
export function findUnwantedWords(files: SourceFile[]): string[] {
  return files.flatMap(({ path, text }) =>
    unwanted.filter((word) => occurs(word, text)).map((word) => `${path} says ${word}`),
  );
}
