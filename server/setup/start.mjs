import { prepare } from './prepare.mjs';
import { run, runCommand } from './terminal.mjs';

await runCommand(async () => {
  await prepare();
  return run(process.execPath, ['dist/server/main.js'], { NODE_ENV: 'production' });
});
