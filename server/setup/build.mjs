import { prepare } from './prepare.mjs';
import { runCommand } from './terminal.mjs';

await runCommand(prepare);
