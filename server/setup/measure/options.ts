import { availableParallelism } from 'node:os';
import { resolve } from 'node:path';
import { parseArgs } from 'node:util';
import { z } from 'zod';
import type { StoredLayout } from '../../../shared/contract/layouts.ts';
import type { MeasureContext } from '../../measuring/measure-context.ts';
import { LAYOUT_USAGE, layoutOptions, readLayout } from './layout-options.ts';
import { UsageError } from './usage-error.ts';

export interface MeasureOptions {
  files: { name: string; path: string }[];
  isJson: boolean;
  workers: number;
  /** Keeps the view files there; a folder of its own for each file is made inside. */
  viewsDir: string | null;
  context: MeasureContext;
  /** Of every file named; `null` where the files say themselves how their samples lie. */
  layout: StoredLayout | null;
}

const MOST_WORKERS = 2;

export const USAGE = `Measures recordings and tells what they show.

  npm run --silent measure -- [options] FILE...

  --json                    everything as JSON, one document per line and file
  --sensor-low-hz NUMBER    lower edge of the sensor's band
  --sensor-high-hz NUMBER   upper edge of the sensor's band
  --full-scale-v NUMBER     volts at the recorder's input that reach full scale
  --preamp-gain-db NUMBER   gain between sensor and recorder
  --time-expansion NUMBER   how many times slower than it was the recording is stored (1)
  --workers NUMBER          threads that measure at once (up to ${MOST_WORKERS})
  --views FOLDER            keeps waveform, pictures, frame table and candidates there
  --help                    this text

${LAYOUT_USAGE}

Exit code 0: all were measured. 1: something else failed. 2: a file was refused, or the command line was.`;

const options = {
  json: { type: 'boolean', default: false },
  help: { type: 'boolean', default: false },
  'sensor-low-hz': { type: 'string' },
  'sensor-high-hz': { type: 'string' },
  'full-scale-v': { type: 'string' },
  'preamp-gain-db': { type: 'string' },
  'time-expansion': { type: 'string', default: '1' },
  workers: { type: 'string' },
  views: { type: 'string' },
  ...layoutOptions,
} as const;

type Name = keyof typeof options;

/**
 * @param argumentList what follows the command.
 * @param folder where names of files are looked up from.
 * @returns `null` where help was asked for.
 * @throws UsageError with a sentence.
 */
export function readOptions(argumentList: string[], folder: string): MeasureOptions | null {
  const { values, positionals } = parse(argumentList);
  if (values.help) return null;
  if (positionals.length === 0) throw new UsageError('No file was named. --help shows how it goes.');
  const positive = z.coerce.number().positive();
  const context: MeasureContext = {
    sensorLowHz: numberOf(values, 'sensor-low-hz', z.coerce.number().min(0)),
    sensorHighHz: numberOf(values, 'sensor-high-hz', positive),
    fullScaleV: numberOf(values, 'full-scale-v', positive),
    preampGainDb: numberOf(values, 'preamp-gain-db', z.coerce.number()),
    timeExpansion: numberOf(values, 'time-expansion', positive) ?? 1,
  };
  const { sensorLowHz, sensorHighHz } = context;
  if (sensorLowHz !== null && sensorHighHz !== null && sensorLowHz >= sensorHighHz) {
    throw new UsageError('--sensor-low-hz is not below --sensor-high-hz.');
  }
  return {
    files: positionals.map((name) => ({ name, path: resolve(folder, name) })),
    isJson: values.json,
    workers:
      numberOf(values, 'workers', z.coerce.number().int().min(1).max(64)) ??
      Math.min(MOST_WORKERS, availableParallelism()),
    viewsDir: values.views === undefined ? null : resolve(folder, values.views),
    context,
    layout: readLayout(values, context.fullScaleV),
  };
}

function parse(args: string[]) {
  try {
    return parseArgs({ args, options, allowPositionals: true });
  } catch (error) {
    throw new UsageError(
      `${error instanceof Error ? error.message : String(error)} --help shows how it goes.`,
    );
  }
}

function numberOf(
  values: Partial<Record<Name, string | boolean>>,
  name: Name,
  schema: z.ZodType<number>,
): number | null {
  const text = values[name];
  if (text === undefined) return null;
  const parsed = schema.safeParse(text);
  if (!parsed.success) throw new UsageError(`--${name} ${String(text)}: that number is not possible here.`);
  return parsed.data;
}
