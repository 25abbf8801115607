import { existsSync } from 'node:fs';
import { installSystemPackages } from './system-packages.mjs';
import { SetupError, findProgram } from './terminal.mjs';

const programs = ['chromium', 'chromium-browser', 'google-chrome', 'google-chrome-stable'];

/**
 * @param {{ wish?: string, searchPath?: string }} [where] the path somebody asked for, and PATH
 * @returns {string | undefined} the full path of a Chromium
 */
export function findChromium({ wish = process.env.RECALESCE_CHROMIUM, searchPath } = {}) {
  if (wish !== undefined && wish !== '') {
    if (existsSync(wish)) return wish;
    throw new SetupError(`RECALESCE_CHROMIUM names ${wish}, and there is no such file.`);
  }
  return programs.map((program) => findProgram(program, searchPath)).find((path) => path !== undefined);
}

/** @returns {Promise<string>} the full path of a Chromium, installed first where there was none */
export async function ensureChromium() {
  const found = findChromium();
  if (found !== undefined) return found;
  await installSystemPackages(['chromium'], 'The browser tests need Chromium');
  const installed = findChromium();
  if (installed === undefined) throw new SetupError('Chromium was installed but is not in the PATH.');
  return installed;
}
