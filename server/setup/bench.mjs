import { ensureBenchBuild } from './builds.mjs';
import { prepare } from './prepare.mjs';
import { run, runCommand } from './terminal.mjs';

await runCommand(async () => {
  await prepare();
  await ensureBenchBuild();
  return run(process.execPath, ['dist/bench/tests/bench/main.js', ...process.argv.slice(2)]);
});
