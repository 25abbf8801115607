/** One value found beside the audio. `chunk` is where it stood (`bext`, `INFO`, `iXML`, `adtl` ...), `key` its name there. */
export type MetadataField = { chunk: string; key: string; value: string };

/** Key of a field that stands for a chunk, or the rest of one, whose content was not read. */
export const UNREAD_KEY = 'unread';

const MAX_VALUE_CHARACTERS = 2000;

/** A field with its value trimmed, cut to 2,000 characters and freed of control characters; `undefined` where nothing is left. */
export function metadataField(chunk: string, key: string, value: string): MetadataField | undefined {
  const clean = value
    .slice(0, MAX_VALUE_CHARACTERS)
    .replace(/\p{Cc}+/gu, ' ')
    .trim();
  return clean === '' ? undefined : { chunk, key, value: clean };
}

export function presentFields(fields: (MetadataField | undefined)[]): MetadataField[] {
  return fields.filter((field) => field !== undefined);
}
