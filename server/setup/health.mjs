import { createServer } from 'node:net';
import { SetupError } from './terminal.mjs';

const healthPollMs = 200;

/**
 * Stops with a sentence when something else listens already: its answers would be taken for ours.
 * @param {number} port
 * @param {string} host
 */
export async function checkPortIsFree(port, host) {
  const isFree = await new Promise((resolve) => {
    const probe = createServer();
    probe.once('error', () => resolve(false));
    probe.listen(port, host, () => probe.close(() => resolve(true)));
  });
  if (!isFree) throw new SetupError(`Port ${port} is in use. Stop what uses it, or set PORT to another.`);
}

/** @param {string} origin */
async function isHealthy(origin) {
  try {
    return (await fetch(`${origin}/api/health`)).ok;
  } catch {
    return false;
  }
}

/**
 * @param {string} origin
 * @param {Promise<number>} ended the server's end, which ends the waiting too
 * @returns {Promise<boolean>} false when the server ended before it was healthy
 */
export async function waitUntilHealthy(origin, ended) {
  let hasEnded = false;
  const end = ended.then(() => {
    hasEnded = true;
  });
  while (!hasEnded) {
    if (await isHealthy(origin)) return !hasEnded;
    await Promise.race([end, new Promise((resolve) => setTimeout(resolve, healthPollMs))]);
  }
  return false;
}
