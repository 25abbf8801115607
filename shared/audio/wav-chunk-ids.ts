/** Chunks whose text is read, for provenance and for the privacy screen. */
export const TEXT_CHUNKS = new Set(['bext', 'iXML', 'LIST', 'cue ', 'guan']);

/** Chunks that can name a person or a place and of which only the presence is told. */
export const OPAQUE_CHUNKS = new Set(['id3 ', 'ID3 ', '_PMX', 'axml', 'cart', 'afsp', 'wamd', 'exif']);

/** Chunks that say how the samples lie or are padding: nothing in them is about people. */
export const TECHNICAL_CHUNKS = new Set([
  'fmt ',
  'data',
  'ds64',
  'fact',
  'JUNK',
  'junk',
  'PAD ',
  'FLLR',
  'PEAK',
  'smpl',
  'inst',
  'acid',
  'strc',
  'minf',
  'elm1',
  'regn',
  'umid',
  'levl',
  'chna',
  'plst',
]);

export function isKnownChunk(id: string): boolean {
  return TEXT_CHUNKS.has(id) || OPAQUE_CHUNKS.has(id) || TECHNICAL_CHUNKS.has(id);
}

/** Four printable characters, as every registered chunk id has. */
export function isChunkId(bytes: Uint8Array): boolean {
  return bytes.length >= 4 && bytes.subarray(0, 4).every((byte) => byte >= 0x20 && byte < 0x7f);
}
