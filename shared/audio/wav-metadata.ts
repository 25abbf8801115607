import { bextFields } from './bext-chunk.ts';
import { guanoFields } from './guano-chunk.ts';
import { ixmlFields } from './ixml-chunk.ts';
import { cueFields, listFields } from './list-chunk.ts';
import { UNREAD_KEY, type MetadataField } from './metadata-field.ts';
import type { MetadataChunk } from './wav-chunks.ts';

const READERS: Record<string, (body: Uint8Array) => MetadataField[]> = {
  bext: bextFields,
  iXML: ixmlFields,
  LIST: listFields,
  'cue ': cueFields,
  guan: guanoFields,
};
const MAX_FIELDS = 2000;

/** Every text beside the audio, in the order of the file; a chunk that is not read stands as one field with the key `unread`. */
export function readWavMetadata(chunks: MetadataChunk[]): MetadataField[] {
  return chunks.flatMap(chunkFields).slice(0, MAX_FIELDS);
}

function chunkFields(chunk: MetadataChunk): MetadataField[] {
  const fields = READERS[chunk.id]?.(chunk.bytes) ?? [];
  const unreadBytes = chunk.sizeBytes - chunk.bytes.length;
  if (unreadBytes <= 0) return fields;
  return [...fields, { chunk: chunk.id.trim(), key: UNREAD_KEY, value: `${unreadBytes} bytes` }];
}
