const LOCALE = 'en-GB';
const NARROW_SPACE = '\u202F';
const NO_BREAK_SPACE = '\u00A0';
const MINUS = '\u2212';
/** What stands where there is no value. */
export const NO_VALUE = '\u2013';

type Maybe = number | null | undefined;

function isMissing(value: Maybe): value is null | undefined {
  return value === null || value === undefined || !Number.isFinite(value);
}

const numberFormats = new Map<string, Intl.NumberFormat>();

/** Making a format costs many times what using it does. */
function numberFormat(options: Intl.NumberFormatOptions): Intl.NumberFormat {
  const key = JSON.stringify(options);
  const known = numberFormats.get(key) ?? new Intl.NumberFormat(LOCALE, options);
  numberFormats.set(key, known);
  return known;
}

/** Digits in groups of three by narrow spaces (SI brochure, 5.4.4), a real minus sign. */
export function formatNumber(value: Maybe, options: Intl.NumberFormatOptions = {}): string {
  if (isMissing(value)) return NO_VALUE;
  const text = numberFormat(options).format(value).replaceAll(',', NARROW_SPACE);
  return text.startsWith('-') ? `${MINUS}${text.slice(1)}` : text;
}

/** A number with its unit, held together by a no-break space. */
export function formatQuantity(value: Maybe, unit: string, digits = 3): string {
  if (isMissing(value)) return NO_VALUE;
  return `${formatNumber(value, { maximumSignificantDigits: digits })}${NO_BREAK_SPACE}${unit}`;
}

interface Step {
  unit: string;
  size: number;
}

function formatInSteps(value: Maybe, steps: readonly Step[], digits: number): string {
  if (isMissing(value)) return NO_VALUE;
  const magnitude = Math.abs(value);
  // A value that rounds up to the next step is shown in it: 999.9 Hz is 1 kHz, never 1000 Hz.
  const fits = (step: Step) => Number((magnitude / step.size).toPrecision(digits)) >= 1;
  const step = steps.find(fits) ?? steps.at(-1);
  return step ? formatQuantity(value / step.size, step.unit, digits) : NO_VALUE;
}

const FREQUENCY_STEPS: readonly Step[] = [
  { unit: 'MHz', size: 1e6 },
  { unit: 'kHz', size: 1e3 },
  { unit: 'Hz', size: 1 },
];

/** 412 kHz, 1 MHz, 49.9 Hz. */
export function formatFrequency(hz: Maybe, digits = 3): string {
  return formatInSteps(hz, FREQUENCY_STEPS, digits);
}

/** A rate in full: 1 000 000 Hz. */
export function formatSampleRate(hz: Maybe): string {
  return isMissing(hz) ? NO_VALUE : `${formatNumber(hz)}${NO_BREAK_SPACE}Hz`;
}

/** 71.4 dB, or with a reference 71.4 dB(AE). */
export function formatDecibels(db: Maybe, unit = 'dB'): string {
  if (isMissing(db)) return NO_VALUE;
  const options = { minimumFractionDigits: 1, maximumFractionDigits: 1 };
  return `${formatNumber(db, options)}${NO_BREAK_SPACE}${unit}`;
}

const SHORT_STEPS: readonly Step[] = [
  { unit: 's', size: 1 },
  { unit: 'ms', size: 1e-3 },
  { unit: '\u00B5s', size: 1e-6 },
  { unit: 'ns', size: 1e-9 },
];

function twoDigits(value: number): string {
  return String(value).padStart(2, '0');
}

/** 228 \u00B5s, 12.4 ms, 86.4 s, 2 min 05 s, 3 h 12 min. */
export function formatDuration(seconds: Maybe, digits = 3): string {
  if (isMissing(seconds)) return NO_VALUE;
  if (Math.abs(seconds) < 100) return formatInSteps(seconds, SHORT_STEPS, digits);
  const whole = Math.round(seconds);
  const hours = Math.floor(whole / 3600);
  const minutes = Math.floor((whole % 3600) / 60);
  const parts =
    hours > 0 ? [hours, 'h', twoDigits(minutes), 'min'] : [minutes, 'min', twoDigits(whole % 60), 's'];
  return parts.join(NO_BREAK_SPACE);
}

/** Place on a time axis: 41.324 80 s, digits after the point in groups of three. */
export function formatSeconds(seconds: Maybe, decimals = 4): string {
  if (isMissing(seconds)) return NO_VALUE;
  const options = { minimumFractionDigits: decimals, maximumFractionDigits: decimals };
  const [whole = '', fraction] = formatNumber(seconds, options).split('.');
  const grouped = fraction?.match(/.{1,3}/g)?.join(NARROW_SPACE);
  return `${grouped ? `${whole}.${grouped}` : whole}${NO_BREAK_SPACE}s`;
}

/** Clock reading of a place in a long recording: 0:41, 12:05, 1:02:09. */
export function formatClock(seconds: Maybe): string {
  if (isMissing(seconds)) return NO_VALUE;
  const whole = Math.floor(Math.max(0, seconds));
  const hours = Math.floor(whole / 3600);
  const minutes = Math.floor((whole % 3600) / 60);
  const tail = twoDigits(whole % 60);
  return hours > 0 ? `${hours}:${twoDigits(minutes)}:${tail}` : `${minutes}:${tail}`;
}

const BYTE_STEPS: readonly Step[] = [
  { unit: 'TB', size: 1e12 },
  { unit: 'GB', size: 1e9 },
  { unit: 'MB', size: 1e6 },
  { unit: 'kB', size: 1e3 },
  { unit: 'B', size: 1 },
];

/** 172.8 MB, in powers of ten. */
export function formatBytes(bytes: Maybe): string {
  return formatInSteps(bytes, BYTE_STEPS, 4);
}

/** A share from 0 to 1 as 99.8 %; the last steps before all and nothing are not rounded away. */
export function formatShare(share: Maybe): string {
  if (isMissing(share)) return NO_VALUE;
  const percent = share * 100;
  const digits = percent > 0 && percent < 100 && (percent < 10 || percent > 99) ? 1 : 0;
  if (percent > 0 && percent < 0.05) return `< 0.1${NO_BREAK_SPACE}%`;
  if (percent < 100 && percent >= 99.95) return `> 99.9${NO_BREAK_SPACE}%`;
  const minimumFractionDigits = percent > 99 ? digits : 0;
  return `${formatNumber(percent, { minimumFractionDigits, maximumFractionDigits: digits })}${NO_BREAK_SPACE}%`;
}

/** 1 candidate, 214 candidates. */
export function formatCount(count: number, one: string, many = `${one}s`): string {
  return `${formatNumber(count)}${NO_BREAK_SPACE}${count === 1 ? one : many}`;
}

/** Total of a list; counting stops at a limit and says so: 10 000+. */
export function formatTotal(total: { count: number; capped: boolean } | null): string {
  if (!total) return NO_VALUE;
  return `${formatNumber(total.count)}${total.capped ? '+' : ''}`;
}

/** Day and time in the viewer's zone. */
export function formatDateTime(instant: string | number | null | undefined): string {
  if (instant === null || instant === undefined) return NO_VALUE;
  const format = new Intl.DateTimeFormat(LOCALE, { dateStyle: 'medium', timeStyle: 'short' });
  return format.format(new Date(instant));
}

export function formatDate(instant: string | number | null | undefined): string {
  if (instant === null || instant === undefined) return NO_VALUE;
  return new Intl.DateTimeFormat(LOCALE, { dateStyle: 'medium' }).format(new Date(instant));
}

/** The same instant in UTC, as files have it: 2026-12-01 07:17:15 UTC. */
export function formatUtc(instant: string | number): string {
  return `${new Date(instant).toISOString().slice(0, 19).replace('T', ' ')} UTC`;
}

/** First and last characters of a checksum, for places where the whole does not fit. */
export function formatHash(hash: string): string {
  return hash.length > 12 ? `${hash.slice(0, 4)}\u2026${hash.slice(-4)}` : hash;
}
