import { decodeText } from '../lib/byte-text.ts';
import { metadataField, presentFields, type MetadataField } from './metadata-field.ts';

const MAX_LINES = 1000;

/** The lines `Key: value` of a `guan` chunk, an open convention of ultrasound recorders. */
export function guanoFields(body: Uint8Array): MetadataField[] {
  const lines = decodeText(body).split('\n', MAX_LINES);
  return presentFields(lines.map(lineField));
}

function lineField(line: string): MetadataField | undefined {
  const colon = line.indexOf(':');
  return colon < 1 ? undefined : metadataField('guan', line.slice(0, colon).trim(), line.slice(colon + 1));
}
