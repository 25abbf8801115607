/** Name of the zone in which the viewer reads times: Europe/Oslo. */
export function viewerZone(): string {
  return new Intl.DateTimeFormat().resolvedOptions().timeZone;
}

function twoDigits(value: number): string {
  return String(value).padStart(2, '0');
}

/** An instant in the form that a `datetime-local` field takes, in the viewer's zone. */
export function toLocalText(instant: string | null): string {
  if (instant === null) return '';
  const date = new Date(instant);
  if (Number.isNaN(date.getTime())) return '';
  const day = [date.getFullYear(), twoDigits(date.getMonth() + 1), twoDigits(date.getDate())].join('-');
  const time = [date.getHours(), date.getMinutes(), date.getSeconds()].map(twoDigits).join(':');
  return `${day}T${time}`;
}

/** The instant in UTC of what a `datetime-local` field holds; null where it holds nothing whole. */
export function fromLocalText(text: string): string | null {
  const date = new Date(text);
  return text === '' || Number.isNaN(date.getTime()) ? null : date.toISOString();
}
