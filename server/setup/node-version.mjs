import { SetupError } from './terminal.mjs';

const needed = { major: 20, minor: 19 };

/**
 * @param {string} version as in process.versions.node
 * @returns {boolean}
 */
export function isNodeRecentEnough(version) {
  const [major = 0, minor = 0] = version.split('.').map(Number);
  return major > needed.major || (major === needed.major && minor >= needed.minor);
}

/** Stops with a sentence when the running Node.js is too old. */
export function checkNodeVersion(version = process.versions.node) {
  if (isNodeRecentEnough(version)) return;
  throw new SetupError(
    `Node.js ${needed.major}.${needed.minor} or later is needed; this is ${version}. Install a newer one and start again.`,
  );
}
