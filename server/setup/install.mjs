import { ensureDependencies } from './dependencies.mjs';
import { checkNodeVersion } from './node-version.mjs';
import { runCommand } from './terminal.mjs';

await runCommand(async () => {
  checkNodeVersion();
  await ensureDependencies();
});
