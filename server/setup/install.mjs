import { ensureChromium } from './chromium.mjs';
import { ensureDependencies } from './dependencies.mjs';
import { checkNodeVersion } from './node-version.mjs';
import { runCommand } from './terminal.mjs';

await runCommand(async () => {
  checkNodeVersion();
  // Side by side: the one mostly compiles, the other mostly downloads.
  await Promise.all([ensureDependencies(), ensureChromium()]);
});
