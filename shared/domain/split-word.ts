/** Loaders of data sets read these words in folder and file names as names of splits. */
const splitWords = new Set([
  'train',
  'training',
  'test',
  'testing',
  'tests',
  'valid',
  'validation',
  'val',
  'dev',
  'eval',
  'evaluation',
]);

/** The first word of a name that a loader would take for a split; `null` where there is none. */
export function splitWordIn(name: string): string | null {
  return (
    name
      .toLowerCase()
      .split(/[^a-z]+/)
      .find((word) => splitWords.has(word)) ?? null
  );
}
