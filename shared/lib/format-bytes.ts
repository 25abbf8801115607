const UNITS = ['B', 'kB', 'MB', 'GB', 'TB'] as const;

/** A size in words for people: decimal units, one place below ten. `0` gives `0 B`; negative or not finite throws RangeError. */
export function formatBytes(sizeBytes: number): string {
  if (!Number.isFinite(sizeBytes) || sizeBytes < 0) throw new RangeError(`sizeBytes ${sizeBytes} is no size`);
  let value = sizeBytes;
  let step = 0;
  while (value >= 999.5 && step < UNITS.length - 1) {
    value /= 1000;
    step++;
  }
  const figures = step === 0 || value >= 10 ? value.toFixed(0) : value.toFixed(1);
  return `${figures} ${UNITS[step]}`;
}
