import type { StoredLayout } from '../../../shared/contract/layouts.ts';
import { csvLayoutSchema, rawLayoutSchema } from '../../../shared/contract/layouts.ts';
import { UsageError } from './usage-error.ts';

/** Options that declare how samples lie in files that do not say so themselves. */
export const layoutOptions = {
  raw: { type: 'string' },
  channels: { type: 'string' },
  'skip-bytes': { type: 'string' },
  csv: { type: 'string' },
  'csv-time': { type: 'string' },
  'csv-time-unit': { type: 'string' },
  'csv-unit': { type: 'string' },
  'sample-rate-hz': { type: 'string' },
} as const;

export const LAYOUT_USAGE = `Files without a header of their own, all of one layout:
  --raw ENCODING            s8 u8, or s16 u16 s24 u24 s32 u32 f32 f64 with le or be (s16le): integers with a sign or
                            without, floats; lowest or highest byte first
  --channels NUMBER         channels of the raw samples, interleaved
  --skip-bytes NUMBER       bytes before the first raw sample (0)
  --csv COLUMNS             a table: columns with the values of one channel each, counted from 0 (1,2)
  --csv-unit UNIT           of the values: V, mV or uV (with --full-scale-v), or full-scale for parts of it
  --csv-time COLUMN         the column of times, where there is one
  --csv-time-unit UNIT      of the times: s, ms, us or ns (s)
  --sample-rate-hz NUMBER   of the raw samples, or of a table without times`;

type LayoutOption = keyof typeof layoutOptions;
type Values = Partial<Record<LayoutOption, string>>;
type Kind = 'raw' | 'csv';

const OPTIONS_OF: Record<Kind, readonly LayoutOption[]> = {
  raw: ['raw', 'channels', 'skip-bytes', 'sample-rate-hz'],
  csv: ['csv', 'csv-time', 'csv-time-unit', 'csv-unit', 'sample-rate-hz'],
};

/** The option behind each field of a layout. */
const OPTION_NAMES: Readonly<Record<string, LayoutOption>> = {
  encoding: 'raw',
  bitsPerSample: 'raw',
  byteOrder: 'raw',
  channels: 'channels',
  headerBytes: 'skip-bytes',
  sampleRateHz: 'sample-rate-hz',
  valueColumns: 'csv',
  timeColumn: 'csv-time',
  timeUnit: 'csv-time-unit',
  unit: 'csv-unit',
};

const ENCODINGS: Readonly<Record<string, string>> = { s: 'signed', u: 'unsigned', f: 'float' };
const BYTE_ORDERS: Readonly<Record<string, string>> = { le: 'little', be: 'big' };

/**
 * The layout that a command line declares, or `null` where it declares none.
 * @param fullScaleV volts at full scale, which a table in volts needs.
 * @throws UsageError with a sentence.
 */
export function readLayout(values: Values, fullScaleV: number | null): StoredLayout | null {
  const kind = kindOf(values);
  if (kind === null) return null;
  if (kind === 'raw') return checked(rawLayoutSchema.safeParse(rawInput(values)), values, kind);
  const layout = checked(csvLayoutSchema.safeParse(csvInput(values)), values, kind);
  if (layout.unit === 'full-scale') return { ...layout, fullScaleV: null };
  if (fullScaleV !== null) return { ...layout, fullScaleV };
  throw new UsageError(`--csv-unit ${layout.unit} needs --full-scale-v, the volts that full scale is.`);
}

function kindOf(values: Values): Kind | null {
  const given = Object.keys(layoutOptions).filter((name): name is LayoutOption => name in values);
  if (given.length === 0) return null;
  if (values.raw !== undefined && values.csv !== undefined)
    throw new UsageError('--raw and --csv cannot both be said of the same files.');
  const kind = values.csv === undefined ? 'raw' : 'csv';
  const stray = given.find((name) => !OPTIONS_OF[kind].includes(name));
  const isDeclared = values[kind] !== undefined;
  if (isDeclared && stray === undefined) return kind;
  const name = stray ?? given[0]!;
  const needed = (Object.keys(OPTIONS_OF) as Kind[]).filter((one) => OPTIONS_OF[one].includes(name));
  throw new UsageError(`--${name} says something only with ${needed.map((one) => `--${one}`).join(' or ')}.`);
}

function rawInput(values: Values): object {
  const [, letter = '', bits = '', order = ''] = /^([suf])(\d+)(le|be)?$/.exec(values.raw ?? '') ?? [];
  const isOneByte = bits === '8' && order === '';
  return {
    kind: 'raw',
    encoding: ENCODINGS[letter],
    bitsPerSample: bits === '' ? undefined : Number(bits),
    byteOrder: isOneByte ? 'little' : BYTE_ORDERS[order],
    channels: toNumber(values.channels),
    sampleRateHz: toNumber(values['sample-rate-hz']),
    headerBytes: toNumber(values['skip-bytes']),
  };
}

function csvInput(values: Values): object {
  return {
    kind: 'CSV',
    timeColumn: toNumber(values['csv-time']) ?? null,
    timeUnit: values['csv-time-unit'],
    sampleRateHz: toNumber(values['sample-rate-hz']) ?? null,
    valueColumns: values.csv?.split(',').map(toNumber),
    unit: values['csv-unit'],
  };
}

/** An empty text is no number, though JavaScript takes it for 0. */
function toNumber(text: string | undefined): number | undefined {
  if (text === undefined) return undefined;
  return text.trim() === '' ? Number.NaN : Number(text);
}

type Parsed<T> =
  | { success: true; data: T }
  | { success: false; error: { issues: readonly { path: readonly PropertyKey[]; message: string }[] } };

function checked<T>(parsed: Parsed<T>, values: Values, kind: Kind): T {
  if (parsed.success) return parsed.data;
  const { path, message } = parsed.error.issues[0]!;
  const name = OPTION_NAMES[String(path[0])] ?? kind;
  const text = values[name];
  if (name === 'raw')
    throw new UsageError(`--raw ${text ?? ''}: that encoding is not known. --help lists them.`);
  if (text === undefined) throw new UsageError(`--${name} is needed with --${kind}${clockHint(name, kind)}.`);
  // What the layouts say themselves begins with a verb.
  const reason = /^[a-z]/.test(message) ? `it ${message}` : 'that is not possible here';
  throw new UsageError(`--${name} ${text}: ${reason}.`);
}

function clockHint(name: LayoutOption, kind: Kind): string {
  return name === 'sample-rate-hz' && kind === 'csv' ? ' where --csv-time names no column of times' : '';
}
