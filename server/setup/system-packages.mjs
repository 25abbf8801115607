import { SetupError, findProgram, runStep, say } from './terminal.mjs';

/** Whether this process may install system packages: Debian's way, and only as root. */
function mayInstall() {
  return findProgram('apt-get') !== undefined && process.getuid?.() === 0;
}

/** @type {Promise<void>} */
let lastTurn = Promise.resolve();

/**
 * Installs Debian packages where that is possible, else stops and says what to install. One after another: apt-get does not
 * run beside itself.
 * @param {string[]} packages
 * @param {string} purpose the first half of the sentence, such as "The browser tests need Chromium"
 */
export function installSystemPackages(packages, purpose) {
  const turn = lastTurn.then(() => install(packages, purpose));
  lastTurn = turn.catch(() => undefined);
  return turn;
}

/**
 * @param {string[]} packages
 * @param {string} purpose
 */
async function install(packages, purpose) {
  const names = packages.join(' ');
  if (!mayInstall()) {
    throw new SetupError(
      `${purpose}. Install it (on Debian: sudo apt-get install -y ${names}) and start again.`,
    );
  }
  say(`${purpose}: installing ${names} ...`);
  const environment = { DEBIAN_FRONTEND: 'noninteractive' };
  // A failed update is no reason to stop: the lists at hand may be good enough.
  await runStep('apt-get', ['update', '-qq'], environment);
  const code = await runStep(
    'apt-get',
    ['install', '-y', '-qq', '--no-install-recommends', ...packages],
    environment,
  );
  if (code !== 0)
    throw new SetupError(`apt-get could not install ${names}. Install them by hand and start again.`);
}
