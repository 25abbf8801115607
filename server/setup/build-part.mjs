import { ensureKernel, ensureServerBuild } from './builds.mjs';
import { SetupError, runCommand } from './terminal.mjs';

/** @type {Record<string, () => Promise<void>>} */
const parts = { kernel: ensureKernel, server: ensureServerBuild };

await runCommand(async () => {
  const build = parts[process.argv[2] ?? ''];
  if (build === undefined) throw new SetupError(`Name one of: ${Object.keys(parts).join(', ')}`);
  await build();
});
