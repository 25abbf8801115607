import { ensureBuilds, ensureServerBuild } from './builds.mjs';
import { ensureDependencies } from './dependencies.mjs';
import { checkNodeVersion } from './node-version.mjs';

/** Makes a fresh clone ready to start; on a prepared one it only compares hashes. */
export async function prepare() {
  checkNodeVersion();
  await ensureDependencies();
  await ensureBuilds();
}

/** The same for a command that needs no browser: only the server is built. */
export async function prepareServer() {
  checkNodeVersion();
  await ensureDependencies();
  await ensureServerBuild();
}
