/** A frequency with its unit, three figures at most after the point and no trailing zeros: `192 kHz`, `1.5 MHz`, `50 Hz`. */
export function frequencyText(frequencyHz: number): string {
  if (Math.abs(frequencyHz) >= 1e6) return `${shortest(frequencyHz / 1e6, 3)} MHz`;
  if (Math.abs(frequencyHz) >= 1e3) return `${shortest(frequencyHz / 1e3, 3)} kHz`;
  return `${shortest(frequencyHz, 1)} Hz`;
}

/** A duration in the unit in which its figures are short: `85 µs`, `12.5 ms`, `4.2 s`, `3 min 20 s`, `2 h 05 min`. */
export function durationText(seconds: number): string {
  if (seconds < 0.000_999_5) return `${shortest(seconds * 1e6, 1)} µs`;
  if (seconds < 0.999_5) return `${shortest(seconds * 1e3, 1)} ms`;
  if (seconds < 59.95) return `${shortest(seconds, 1)} s`;
  const whole = Math.round(seconds);
  if (whole < 3600) return `${Math.floor(whole / 60)} min ${twoDigits(whole % 60)} s`;
  const minutes = Math.round(seconds / 60);
  return `${Math.floor(minutes / 60)} h ${twoDigits(minutes % 60)} min`;
}

/** A level with one figure after the point and its unit; a dash where there is none. */
export function levelText(levelDb: number | null, unit: 'dB' | 'dB(AE)'): string {
  return levelDb === null ? '–' : `${levelDb.toFixed(1).replace('-', '−')} ${unit}`;
}

function shortest(value: number, places: number): string {
  return String(Number(value.toFixed(places)));
}

function twoDigits(value: number): string {
  return String(value).padStart(2, '0');
}
