import { createHash } from 'node:crypto';
import { mkdirSync, readFileSync, readdirSync, rmSync, statSync, writeFileSync } from 'node:fs';
import { dirname, join, relative, sep } from 'node:path';

/**
 * @param {string} path a file or a folder; missing ones have no files
 * @returns {string[]} full paths of all files below, sorted
 */
function filesBelow(path) {
  const found = statSync(path, { throwIfNoEntry: false });
  if (found === undefined) return [];
  if (found.isFile()) return [path];
  return readdirSync(path)
    .sort()
    .flatMap((name) => filesBelow(join(path, name)));
}

/**
 * One hash over the names and contents of files, so that a change of either is seen and a new time stamp is not.
 * @param {string} root
 * @param {string[]} paths files or folders below the root
 * @param {string[]} [facts] anything else the result depends on
 * @returns {string}
 */
export function hashOfSources(root, paths, facts = []) {
  const hash = createHash('sha256');
  for (const file of paths.flatMap((path) => filesBelow(join(root, path)))) {
    const content = readFileSync(file);
    hash.update(`${relative(root, file).split(sep).join('/')}\n${content.length}\n`);
    hash.update(content);
  }
  for (const fact of facts) hash.update(`${fact}\n`);
  return hash.digest('hex');
}

/**
 * @param {string} stampFile
 * @returns {string | undefined} what was stamped last
 */
export function readStamp(stampFile) {
  if (statSync(stampFile, { throwIfNoEntry: false }) === undefined) return undefined;
  return readFileSync(stampFile, 'utf8').trim();
}

/**
 * @param {string} stampFile
 * @param {string} value
 */
export function writeStamp(stampFile, value) {
  mkdirSync(dirname(stampFile), { recursive: true });
  writeFileSync(stampFile, `${value}\n`);
}

/** @param {string} stampFile */
export function clearStamp(stampFile) {
  rmSync(stampFile, { force: true });
}
