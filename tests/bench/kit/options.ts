import { parseArgs } from 'node:util';

export interface BenchOptions {
  isQuick: boolean;
  isJson: boolean;
  isHelp: boolean;
  /** Of families; all where none is named. */
  names: string[];
}

export class UsageError extends Error {}

/** @throws UsageError with a sentence. */
export function readOptions(argumentList: string[], known: readonly string[]): BenchOptions {
  const { values, positionals } = parse(argumentList);
  const unknown = positionals.filter((name) => !known.includes(name));
  if (unknown.length > 0) {
    throw new UsageError(`There are no rows named ${unknown.join(', ')}. There are: ${known.join(', ')}.`);
  }
  return { isQuick: values.quick, isJson: values.json, isHelp: values.help, names: positionals };
}

function parse(args: string[]) {
  try {
    return parseArgs({
      args,
      allowPositionals: true,
      options: {
        quick: { type: 'boolean', default: false },
        json: { type: 'boolean', default: false },
        help: { type: 'boolean', default: false },
      },
    });
  } catch (error) {
    throw new UsageError(error instanceof Error ? error.message : String(error));
  }
}
