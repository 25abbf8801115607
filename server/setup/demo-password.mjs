import { randomInt } from 'node:crypto';
import { existsSync, mkdirSync, readFileSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';

// Without the letters and digits that are taken for each other.
const alphabet = 'abcdefghjkmnpqrstuvwxyz23456789';

/** @returns {string} four groups of four: 79 bits, and still copied by hand */
export function generateDemoPassword() {
  const group = () => Array.from({ length: 4 }, () => alphabet[randomInt(alphabet.length)]).join('');
  return Array.from({ length: 4 }, group).join('-');
}

/**
 * The password of every demo sign-in: the one given, else the one kept in the data folder, else a new one kept there.
 * @param {string} dataDir
 * @param {string | undefined} given
 * @returns {string}
 */
export function demoPassword(dataDir, given) {
  if (given !== undefined && given !== '') return given;
  const file = join(dataDir, 'demo-password');
  if (existsSync(file)) return readFileSync(file, 'utf8').trim();
  const password = generateDemoPassword();
  mkdirSync(dataDir, { recursive: true });
  writeFileSync(file, `${password}\n`, { mode: 0o600 });
  return password;
}
