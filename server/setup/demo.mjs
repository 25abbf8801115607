import { resolve } from 'node:path';
import { demoPassword } from './demo-password.mjs';
import { prepare } from './prepare.mjs';
import { checkPortIsFree, waitUntilHealthy } from './health.mjs';
import { SetupError, projectRoot, run, runCommand, say } from './terminal.mjs';

const signIns = [
  'administrator',
  'contributor',
  'contributor2',
  'labeler',
  'reviewer',
  'curator',
  'curator2',
];

/** @param {Record<string, string>} settings */
async function seed(settings) {
  say('Preparing the demo data ...');
  const code = await run(process.execPath, ['dist/server/setup/seed-demo.js'], settings);
  if (code !== 0) throw new SetupError('The demo data could not be made; the lines above say why.');
}

/**
 * @param {string} origin
 * @param {string} password
 */
function announce(origin, password) {
  say('');
  say(`Recalesce is ready: ${origin}`);
  say('');
  say('Sign in as one of');
  for (const name of signIns) say(`  ${name}@demo.example`);
  say(`Password of each: ${password}`);
  say('');
  say('Ctrl-C stops it. The demo data stays.');
}

await runCommand(async () => {
  await prepare();
  const dataDir = resolve(projectRoot, process.env.RECALESCE_DATA_DIR || 'data-demo');
  const port = process.env.PORT || '4780';
  const origin = process.env.RECALESCE_PUBLIC_URL || `http://localhost:${port}`;
  const password = demoPassword(dataDir, process.env.RECALESCE_DEMO_PASSWORD);
  const settings = {
    NODE_ENV: 'production',
    PORT: port,
    RECALESCE_DEMO: '1',
    RECALESCE_LOG_LEVEL: process.env.RECALESCE_LOG_LEVEL || 'warn',
    RECALESCE_HOST: '127.0.0.1',
    RECALESCE_PUBLIC_URL: origin,
    RECALESCE_DATA_DIR: dataDir,
    RECALESCE_DEMO_PASSWORD: password,
  };
  await checkPortIsFree(Number(port), settings.RECALESCE_HOST);
  await seed(settings);
  const ended = run(process.execPath, ['dist/server/main.js'], settings);
  if (await waitUntilHealthy(`http://127.0.0.1:${port}`, ended)) announce(origin, password);
  return ended;
});
