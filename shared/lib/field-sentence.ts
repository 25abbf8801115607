interface Field {
  path: string;
  message: string;
}

/** A path as people read it: "startSample" is "Start sample", "labId" is "Lab". */
export function fieldName(path: string): string {
  const words = path
    .replace(
      /([a-z0-9])([A-Z])/g,
      (_pair, before: string, after: string) => `${before} ${after.toLowerCase()}`,
    )
    .replace(/ hz\b/g, ' Hz')
    .replace(/ id\b/g, '')
    .replaceAll('.', ' ');
  return words.charAt(0).toUpperCase() + words.slice(1);
}

/** The message goes on where the name of the field ends: "is needed", "must lie after the start". */
export function fieldSentence({ path, message }: Field): string {
  return `${path === '' ? 'The input' : fieldName(path)} ${message}.`.replace(/\.\.$/, '.');
}
