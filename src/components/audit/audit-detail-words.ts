function isChange(value: object): value is { before: unknown; after: unknown } {
  return 'before' in value && 'after' in value;
}

function wordsOf(value: unknown): string {
  if (value === null || value === undefined || value === '') return 'none';
  if (typeof value === 'boolean') return value ? 'yes' : 'no';
  if (Array.isArray(value)) return value.length > 0 ? value.map(wordsOf).join(', ') : 'none';
  if (typeof value !== 'object') return String(value);
  if (isChange(value)) return `${wordsOf(value.before)} \u2192 ${wordsOf(value.after)}`;
  return Object.entries(value)
    .map(([name, part]) => `${name} ${wordsOf(part)}`)
    .join(', ');
}

/** The facts of an audit entry in one line: "disabled: no \u2192 yes; reason: left the lab". */
export function auditDetailWords(detail: Readonly<Record<string, unknown>>): string {
  return Object.entries(detail)
    .map(([name, value]) => `${name}: ${wordsOf(value)}`)
    .join('; ');
}
