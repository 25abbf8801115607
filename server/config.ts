import { existsSync } from 'node:fs';
import path from 'node:path';
import { fileURLToPath } from 'node:url';
import { z } from 'zod';

export interface DataPaths {
  db: string;
  blobs: string;
  views: string;
  uploads: string;
  keys: string;
  archives: string;
  /** WAV files made of recordings that came in as something else; whatever is missing is made anew. */
  working: string;
}

export interface Config {
  projectRoot: string;
  port: number;
  host: string;
  /** Origin that people type into the browser; decides secure cookies, exact Origin and links. */
  publicUrl: string;
  secure: boolean;
  dataDir: string;
  paths: DataPaths;
  demo: boolean;
  demoPassword: string | null;
  development: boolean;
  trustProxyHops: number;
  logLevel: LogLevel;
  measureWorkers: number;
}

const logLevels = ['fatal', 'error', 'warn', 'info', 'debug', 'trace', 'silent'] as const;
type LogLevel = (typeof logLevels)[number];

/** Carries one sentence for each setting that is wrong. */
export class ConfigError extends Error {
  readonly sentences: string[];
  constructor(sentences: string[]) {
    super(sentences.join('\n'));
    this.sentences = sentences;
  }
}

function wholeNumber(name: string, low: number, high: number, fallback: number) {
  const message = `${name} must be a whole number from ${low} to ${high}.`;
  return z
    .string()
    .regex(/^\d{1,6}$/, message)
    .transform(Number)
    .refine((value) => value >= low && value <= high, message)
    .default(fallback);
}

function flag(name: string) {
  return z
    .enum(['0', '1', 'true', 'false'], `${name} must be 1 or 0.`)
    .transform((value) => value === '1' || value === 'true')
    .default(false);
}

const settingsSchema = z.object({
  PORT: wholeNumber('PORT', 1, 65_535, 4780),
  RECALESCE_HOST: z
    .string()
    .regex(/^[A-Za-z0-9.:_-]+$/, 'RECALESCE_HOST must be a host name or an address, such as 127.0.0.1.')
    .default('127.0.0.1'),
  RECALESCE_PUBLIC_URL: z.string().optional(),
  RECALESCE_DATA_DIR: z.string().min(1, 'RECALESCE_DATA_DIR must name a folder.').default('./data'),
  RECALESCE_DEMO: flag('RECALESCE_DEMO'),
  RECALESCE_DEV: flag('RECALESCE_DEV'),
  RECALESCE_DEMO_PASSWORD: z
    .string()
    .min(12, 'RECALESCE_DEMO_PASSWORD must have at least 12 characters.')
    .max(256, 'RECALESCE_DEMO_PASSWORD must have at most 256 characters.')
    .optional(),
  RECALESCE_TRUST_PROXY: wholeNumber('RECALESCE_TRUST_PROXY', 0, 10, 0),
  RECALESCE_LOG_LEVEL: z
    .enum(logLevels, `RECALESCE_LOG_LEVEL must be one of ${logLevels.join(', ')}.`)
    .default('info'),
  RECALESCE_MEASURE_WORKERS: wholeNumber('RECALESCE_MEASURE_WORKERS', 1, 64, 1),
});
type Settings = z.output<typeof settingsSchema>;

/** Reads all settings from an environment; throws `ConfigError` with a sentence for each wrong one. */
export function readConfig(
  env: Readonly<Record<string, string | undefined>>,
  projectRoot = findProjectRoot(),
): Config {
  const parsed = settingsSchema.safeParse(withoutEmpty(env));
  if (!parsed.success) throw new ConfigError(parsed.error.issues.map((issue) => issue.message));
  const settings = parsed.data;
  const publicUrl = readPublicUrl(settings);
  const dataDir = path.resolve(projectRoot, settings.RECALESCE_DATA_DIR);
  return {
    projectRoot,
    port: settings.PORT,
    host: settings.RECALESCE_DEMO ? '127.0.0.1' : settings.RECALESCE_HOST,
    publicUrl: publicUrl.origin,
    secure: publicUrl.protocol === 'https:',
    dataDir,
    paths: dataPaths(dataDir),
    demo: settings.RECALESCE_DEMO,
    demoPassword: settings.RECALESCE_DEMO_PASSWORD ?? null,
    development: settings.RECALESCE_DEV,
    trustProxyHops: settings.RECALESCE_TRUST_PROXY,
    logLevel: settings.RECALESCE_LOG_LEVEL,
    measureWorkers: settings.RECALESCE_MEASURE_WORKERS,
  };
}

export function processConfig(): Config {
  return readConfig(process.env);
}

export function dataPaths(dataDir: string): DataPaths {
  const inside = (name: string) => path.join(dataDir, name);
  return {
    db: inside('db'),
    blobs: inside('blobs'),
    views: inside('views'),
    uploads: inside('uploads'),
    keys: inside('keys'),
    archives: inside('archives'),
    working: inside('working'),
  };
}

function withoutEmpty(env: Readonly<Record<string, string | undefined>>) {
  return Object.fromEntries(Object.entries(env).filter(([, value]) => value !== undefined && value !== ''));
}

function readPublicUrl(settings: Settings): URL {
  const text = settings.RECALESCE_PUBLIC_URL ?? `http://localhost:${settings.PORT}`;
  const url = URL.canParse(text) ? new URL(text) : null;
  const plain =
    url !== null && ['http:', 'https:'].includes(url.protocol) && url.pathname === '/' && url.search === '';
  if (!plain) {
    throw new ConfigError([
      'RECALESCE_PUBLIC_URL must be an address without a path, such as https://sound.example.org.',
    ]);
  }
  if (url.protocol === 'http:' && !['localhost', '127.0.0.1', '[::1]'].includes(url.hostname)) {
    throw new ConfigError([
      `RECALESCE_PUBLIC_URL is ${url.origin}: browsers need https everywhere but on localhost, so give an https address.`,
    ]);
  }
  return url;
}

/** The compiled server lies one level deeper than the source, so the root is looked for instead of counted. */
function findProjectRoot(): string {
  let folder = path.dirname(fileURLToPath(import.meta.url));
  while (!existsSync(path.join(folder, 'package.json'))) {
    const parent = path.dirname(folder);
    if (parent === folder) return process.cwd();
    folder = parent;
  }
  return folder;
}
