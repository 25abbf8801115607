import { ensureKernel } from './builds.mjs';
import { ensureDependencies } from './dependencies.mjs';
import { checkNodeVersion } from './node-version.mjs';
import { run, runCommand } from './terminal.mjs';

await runCommand(async () => {
  checkNodeVersion();
  await ensureDependencies();
  await ensureKernel();
  const watch = ['node_modules/tsx/dist/cli.mjs', 'watch', '--clear-screen=false', 'server/main.ts'];
  return run(process.execPath, watch, { NODE_ENV: 'development', RECALESCE_DEV: '1' });
});
