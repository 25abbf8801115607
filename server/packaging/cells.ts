/** Seconds with nine digits, rounded half up from exact integers, so that no binary fraction shows. */
export function secondsText(samples: number, sampleRateHz: number): string {
  if (!Number.isInteger(sampleRateHz)) return (samples / sampleRateHz).toFixed(9);
  const rate = BigInt(sampleRateHz);
  const nanoseconds = (BigInt(samples) * 2_000_000_000n + rate) / (2n * rate);
  const digits = nanoseconds.toString().padStart(10, '0');
  return `${digits.slice(0, -9)}.${digits.slice(-9)}`;
}

/**
 * The shortest decimal that reads back as the same double, with `.` and, far from one, an exponent `E` as XML Schema
 * and Table Schema write it.
 */
export function numberText(value: number): string {
  if (!Number.isFinite(value)) throw new Error(`${value} is not a number that can be written.`);
  return String(value === 0 ? 0 : value).toUpperCase();
}

export function integerText(value: number): string {
  if (!Number.isSafeInteger(value))
    throw new Error(`${value} is not a whole number that can be written exactly.`);
  return String(value === 0 ? 0 : value);
}

/** What a spreadsheet may take for a formula, also behind blanks and in full-width forms; and the mark itself. */
const risky = /^(?:\s*[=+\-@＝＋－＠]|[\t\n'])/u;
/** Control characters have no place in a table, apart from line end and tab. */
const controls = /[^\P{Cc}\n\t]/gu;

/**
 * Free text of people as a cell. Line ends become LF and control characters go; a text that a spreadsheet could run
 * gets one apostrophe before it, and so does one that begins with an apostrophe, so that readers take off exactly one.
 */
export function freeText(text: string): string {
  const clean = text.replace(/\r\n?/g, '\n').replace(controls, '');
  return risky.test(clean) ? `'${clean}` : clean;
}

/** The text as it was before `freeText` guarded it. */
export function unguarded(cell: string): string {
  return cell.startsWith("'") ? cell.slice(1) : cell;
}

/** One line, for headers of formats in which a line end has a meaning. */
export function oneLine(text: string): string {
  return text.replace(controls, ' ').replace(/\s+/g, ' ').trim();
}
