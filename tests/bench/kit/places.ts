import { existsSync } from 'node:fs';
import { dirname, join } from 'node:path';

/** The compiled bench lies deeper than its source, so the root is looked for instead of counted. */
function findRoot(folder: string): string {
  return existsSync(join(folder, 'package.json')) ? folder : findRoot(dirname(folder));
}

export const projectRoot = findRoot(import.meta.dirname);

/** A compiled file of this bench. @param name as in `programs/tiles`. */
export function compiledFile(name: string): string {
  return join(import.meta.dirname, '..', `${name}.js`);
}

/** A file of this bench that is used as it is written. */
export function sourceFile(name: string): string {
  return join(projectRoot, 'tests/bench', name);
}
