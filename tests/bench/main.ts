import { mkdtempSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { families } from './families.ts';
import { MissingHereError, type Bench, type BenchRow, type RowFamily } from './kit/bench.ts';
import { describeMachine } from './kit/machine.ts';
import { readOptions, UsageError, type BenchOptions } from './kit/options.ts';
import { endPrograms } from './kit/programs.ts';
import { tableLines } from './kit/table.ts';

const USAGE = `Measures how fast and how exact this is, against what there is besides.

  npm run bench -- [--quick] [--json] [ROWS...]

  --quick  small inputs and few runs: shows that everything works, its figures prove nothing
  --json   the table as JSON

Inputs are made in RECALESCE_BENCH_DIR, or in the system's folder for temporary files, and removed at the end.
Exit code 0: all that must hold holds. 1: something does not, or could not be measured. 2: the command line was wrong.

Rows:`;

process.exitCode = await command();

async function command(): Promise<number> {
  try {
    const options = readOptions(
      process.argv.slice(2),
      families.map(({ name }) => name),
    );
    if (!options.isHelp) return await runAll(options);
    const width = Math.max(...families.map(({ name }) => name.length));
    write([USAGE, ...families.map(({ name, about }) => `  ${name.padEnd(width)}  ${about}`)]);
    return 0;
  } catch (error) {
    if (!(error instanceof UsageError)) throw error;
    process.stderr.write(`${error.message}\n`);
    return 2;
  }
}

async function runAll({ isQuick, isJson, names }: BenchOptions): Promise<number> {
  const folder = mkdtempSync(join(process.env.RECALESCE_BENCH_DIR ?? tmpdir(), 'recalesce-bench-'));
  const bench: Bench = {
    isQuick,
    pairs: isQuick ? 3 : 5,
    folder,
    say: (line) => process.stderr.write(`${line}\n`),
  };
  stopOnSignals(folder);
  try {
    const machine = await describeMachine(bench);
    if (!isJson) write([...machine, '']);
    const rows: BenchRow[] = [];
    for (const family of families) {
      if (names.length === 0 || names.includes(family.name)) rows.push(...(await rowsOf(family, bench)));
    }
    write(isJson ? [JSON.stringify({ machine, isQuick, rows })] : tableLines(rows));
    if (isQuick) bench.say('Quick: small inputs and few runs, so that none of these figures is proof.');
    return rows.every(({ holds }) => holds !== false) ? 0 : 1;
  } finally {
    rmSync(folder, { recursive: true, force: true });
  }
}

async function rowsOf({ name, about, run }: RowFamily, bench: Bench): Promise<BenchRow[]> {
  bench.say(`${name}: ${about} ...`);
  try {
    const rows = await run(bench);
    for (const line of tableLines(rows).slice(2)) bench.say(`  ${line}`);
    return rows;
  } catch (error) {
    const isMissing = error instanceof MissingHereError;
    const sentence = error instanceof Error ? error.message : String(error);
    bench.say(
      isMissing ? `  left out: ${sentence}` : `  failed: ${error instanceof Error ? error.stack : sentence}`,
    );
    if (isMissing) return [{ what: about, ours: `left out: ${sentence}` }];
    return [{ what: about, ours: `failed: ${sentence.split('\n')[0]}`, holds: false }];
  }
}

function write(lines: string[]): void {
  process.stdout.write(`${lines.join('\n')}\n`);
}

function stopOnSignals(folder: string): void {
  const stop = () => {
    endPrograms();
    rmSync(folder, { recursive: true, force: true });
    process.exit(130);
  };
  process.once('SIGINT', stop).once('SIGTERM', stop);
}
