import { ensureChromium } from './chromium.mjs';
import { prepare } from './prepare.mjs';
import { resultsFile } from './test-results.mjs';
import { run, runCommand } from './terminal.mjs';

const reporters = ['--reporter=default', '--reporter=json', `--outputFile.json=${resultsFile}`];

await runCommand(async () => {
  await prepare();
  const chromium = await ensureChromium();
  return run(
    process.execPath,
    ['node_modules/vitest/vitest.mjs', 'run', ...reporters, ...process.argv.slice(2)],
    { RECALESCE_CHROMIUM: chromium },
  );
});
