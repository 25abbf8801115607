import { asciiText } from '../lib/byte-text.ts';
import { formatBytes } from '../lib/format-bytes.ts';
import { isChunkId, isKnownChunk, TECHNICAL_CHUNKS, TEXT_CHUNKS } from './wav-chunk-ids.ts';
import { dataExtent, type DataExtent } from './wav-data-extent.ts';
import { parseFormatChunk, type FormatChunk } from './wav-format-chunk.ts';
import { RefusedFileError } from './refused-file-error.ts';
import { DS64_READ_BYTES, parseWideSizes, SIZE_ELSEWHERE, type WideSizes } from './wav-wide-sizes.ts';
import type { ReadBytes } from './window-reader.ts';

const FIRST_CHUNK_OFFSET = 12;
const CHUNK_HEAD_BYTES = 8;
const MAX_CHUNKS = 10_000;
const FORMAT_READ_BYTES = 64;
const MAX_TEXT_CHUNK_BYTES = 1024 * 1024;
const MAX_TEXT_BYTES = 4 * 1024 * 1024;

/** A chunk beside the audio; `bytes` is empty where only its presence matters and shorter than `sizeBytes` where it was too long. */
export type MetadataChunk = { id: string; offset: number; sizeBytes: number; bytes: Uint8Array };

export type WalkedChunks = {
  format?: FormatChunk;
  data?: DataExtent;
  metadata: MetadataChunk[];
  warnings: string[];
  /** Where the list of chunks stops making sense, if it does. */
  brokenAt?: number;
};

type Walk = WalkedChunks & { read: ReadBytes; fileBytes: number; wideSizes?: WideSizes; textBytes: number };
type Chunk = { id: string; offset: number; sizeBytes: number };

/**
 * Walks the chunks of a RIFF, RF64 or BW64 file from byte 12. The first `fmt ` and the first `data` count. Reads at most 10,000
 * chunk heads, 1 MiB of one text chunk and 4 MiB of all; nothing is allocated by a size the file claims.
 */
export async function walkChunks(read: ReadBytes, fileBytes: number): Promise<WalkedChunks> {
  const walk: Walk = { read, fileBytes, metadata: [], warnings: [], textBytes: 0 };
  let at = FIRST_CHUNK_OFFSET;
  for (let count = 0; at + CHUNK_HEAD_BYTES <= fileBytes; count++) {
    if (count === MAX_CHUNKS) return stopCounting(walk, at);
    const head = await read(at, CHUNK_HEAD_BYTES);
    if (head.length < CHUNK_HEAD_BYTES || !isChunkId(head)) return breakOff(walk, at);
    const chunk = chunkAt(walk, head, at);
    const endOffset = await takeChunk(walk, chunk);
    at = await nextChunkOffset(walk, chunk.id, endOffset);
  }
  return walk;
}

function chunkAt(walk: Walk, head: Uint8Array, at: number): Chunk {
  const id = asciiText(head, 0, 4);
  const field = new DataView(head.buffer, head.byteOffset, CHUNK_HEAD_BYTES).getUint32(4, true);
  // EBU Tech 3306, 3.4: only a size field of all ones points to ds64. A ds64 that was never filled in says 0.
  const wide = field === SIZE_ELSEWHERE ? walk.wideSizes?.get(id) : undefined;
  return { id, offset: at + CHUNK_HEAD_BYTES, sizeBytes: wide ?? field };
}

/** Keeps what the chunk holds and returns where its body ends. */
async function takeChunk(walk: Walk, chunk: Chunk): Promise<number> {
  if (chunk.id === 'data') return takeData(walk, chunk);
  if (chunk.id === 'fmt ') await takeFormat(walk, chunk);
  else if (chunk.id === 'ds64') walk.wideSizes ??= parseWideSizes(await body(walk, chunk, DS64_READ_BYTES));
  else if (!TECHNICAL_CHUNKS.has(chunk.id)) walk.metadata.push(await metadataChunk(walk, chunk));
  return chunk.offset + chunk.sizeBytes;
}

async function takeFormat(walk: Walk, chunk: Chunk): Promise<void> {
  if (walk.format) walk.warnings.push('The file has more than one format chunk; the first one was used.');
  else walk.format = parseFormatChunk(await body(walk, chunk, FORMAT_READ_BYTES));
}

async function takeData(walk: Walk, chunk: Chunk): Promise<number> {
  if (walk.data) {
    walk.warnings.push('The file has more than one data chunk; only the first one was taken.');
    return chunk.offset + chunk.sizeBytes;
  }
  const { read, fileBytes } = walk;
  walk.data = await dataExtent({ dataOffset: chunk.offset, declaredBytes: chunk.sizeBytes, fileBytes, read });
  return walk.data.dataOffset + (walk.data.promisedBytes ?? walk.data.presentBytes);
}

async function metadataChunk(walk: Walk, chunk: Chunk): Promise<MetadataChunk> {
  if (!TEXT_CHUNKS.has(chunk.id)) return { ...chunk, bytes: new Uint8Array(0) };
  const bytes = await body(walk, chunk, Math.min(MAX_TEXT_CHUNK_BYTES, MAX_TEXT_BYTES - walk.textBytes));
  walk.textBytes += bytes.length;
  if (bytes.length < chunk.sizeBytes) {
    walk.warnings.push(
      `Of the metadata chunk "${chunk.id.trim()}" ${formatBytes(bytes.length)} of ${formatBytes(chunk.sizeBytes)} could be read.`,
    );
  }
  return { ...chunk, bytes };
}

/** At most `limit` bytes of a chunk's body; a copy, since the window moves on. */
async function body(walk: Walk, chunk: Chunk, limit: number): Promise<Uint8Array> {
  return (await walk.read(chunk.offset, Math.min(chunk.sizeBytes, limit))).slice();
}

/** RIFF pads odd chunks by a byte that the size leaves out. Some writers forget it: then the next id stands one byte earlier. */
async function nextChunkOffset(walk: Walk, id: string, endOffset: number): Promise<number> {
  if (endOffset % 2 === 0 || endOffset >= walk.fileBytes) return endOffset;
  const head = await walk.read(endOffset, 5);
  const padded = head.subarray(1);
  const isPadMissing = isKnownChunk(asciiText(padded, 0, 4))
    ? false
    : isKnownChunk(asciiText(head, 0, 4)) || (!isChunkId(padded) && isChunkId(head));
  if (!isPadMissing) return endOffset + 1;
  walk.warnings.push(`The chunk "${id.trim()}" has an odd size and lacks the byte that must follow it.`);
  return endOffset;
}

function breakOff(walk: Walk, at: number): WalkedChunks {
  walk.brokenAt = at;
  if (walk.data) {
    const rest = formatBytes(walk.fileBytes - at);
    walk.warnings.push(
      `After the audio ${rest} follow that are no part of a WAV file; they were left alone.`,
    );
  }
  return walk;
}

function stopCounting(walk: Walk, at: number): WalkedChunks {
  if (!walk.format || !walk.data) {
    throw new RefusedFileError(
      'too-many-chunks',
      `No audio was found within the first ${MAX_CHUNKS.toLocaleString('en')} chunks of the file.`,
    );
  }
  walk.warnings.push(
    `The file has more than ${MAX_CHUNKS.toLocaleString('en')} chunks; those from byte ${at} on were not read.`,
  );
  return walk;
}
