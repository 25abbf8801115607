import { asciiText, decodeText } from '../lib/byte-text.ts';
import type { AudioFormat } from './audio-format.ts';
import type { ByteSource } from './byte-source.ts';
import { lastFlacFrame } from './flac-frame-header.ts';
import { metadataField, presentFields, UNREAD_KEY, type MetadataField } from './metadata-field.ts';
import { RefusedFileError } from './refused-file-error.ts';
import { windowReader, type ReadBytes } from './window-reader.ts';

export type FlacHeader = {
  format: AudioFormat;
  /** MD5 of the samples as the encoder got them, in hexadecimal digits; `undefined` where it gave none. */
  md5: string | undefined;
  metadata: MetadataField[];
  /** Frames of the largest block. */
  maxBlockFrames: number;
};

type StreamInfo = Omit<FlacHeader, 'format' | 'metadata'> & {
  maxFrameBytes: number;
  sampleRateHz: number;
  channels: number;
  bitsPerSample: number;
  /** 0 where the encoder did not know. */
  totalFrames: number;
};

type Block = { type: number; offset: number; sizeBytes: number; isLast: boolean };

const MAX_BLOCKS = 1000;
const MAX_TEXT_BYTES = 1024 * 1024;
const MAX_COMMENTS = 1000;
const LEAST_TAIL_BYTES = 256 * 1024;
const MOST_TAIL_BYTES = 4 * 1024 * 1024;
/** The widths that the decoder gives back exactly. */
const WIDTHS = [8, 16, 24];
const BLOCK_NAMES: Record<number, string> = { 2: 'APPLICATION', 5: 'CUESHEET', 6: 'PICTURE' };
const VORBIS_COMMENT = 4;

export function isFlac(head: Uint8Array): boolean {
  return asciiText(head, 0, 4) === 'fLaC';
}

/**
 * Reads what stands before the audio of a FLAC file (RFC 9639, 8) and the header of its last frame, which tells how much is really
 * there. Reads at most 1,000 blocks, 1 MiB of texts and 4 MiB at the end. Throws RefusedFileError.
 */
export async function readFlacHeader(source: ByteSource): Promise<FlacHeader> {
  const read = windowReader(source);
  const info = parseStreamInfo(await streamInfoBody(read));
  const { metadata, audioOffset } = await readBlocks(read, source.sizeBytes);
  const { frames, warnings } = await countFrames(source, info, audioOffset);
  const { sampleRateHz, channels, bitsPerSample, md5, maxBlockFrames } = info;
  const layout = { encoding: 'integer', bitsPerSample, channels } as const;
  const format: AudioFormat = {
    container: 'FLAC',
    ...layout,
    sampleRateHz,
    frames,
    extensible: false,
    warnings,
  };
  return { format, md5, metadata, maxBlockFrames };
}

async function streamInfoBody(read: ReadBytes): Promise<Uint8Array> {
  const body = (await read(8, 34)).slice();
  const head = await read(0, 8);
  const isWhole = head.length === 8 && isFlac(head) && (head[4]! & 0x7f) === 0 && body.length === 34;
  if (!isWhole) throw new RefusedFileError('broken-format', 'The FLAC file has no stream info at its start.');
  return body;
}

function parseStreamInfo(body: Uint8Array): StreamInfo {
  const view = new DataView(body.buffer, body.byteOffset, body.byteLength);
  const packed = view.getUint32(10);
  const info = {
    maxBlockFrames: view.getUint16(2),
    maxFrameBytes: view.getUint32(6) & 0xffffff,
    sampleRateHz: packed >>> 12,
    channels: ((packed >>> 9) & 7) + 1,
    bitsPerSample: ((packed >>> 4) & 31) + 1,
    totalFrames: (packed & 15) * 2 ** 32 + view.getUint32(14),
    md5: hexText(body.subarray(18, 34)),
  };
  requireReadable(info);
  return info;
}

function requireReadable({ sampleRateHz, bitsPerSample, maxBlockFrames }: StreamInfo): void {
  if (sampleRateHz === 0) throw new RefusedFileError('rate', 'The FLAC file says a sample rate of 0 Hz.');
  if (!WIDTHS.includes(bitsPerSample)) {
    throw new RefusedFileError(
      'width',
      `The FLAC file holds samples of ${bitsPerSample} bits; 8, 16 and 24 bits are read. Save it as WAV with the same rate.`,
    );
  }
  if (maxBlockFrames < 16)
    throw new RefusedFileError('broken-format', 'The FLAC file says blocks of less than 16 samples.');
}

function hexText(bytes: Uint8Array): string | undefined {
  if (bytes.every((byte) => byte === 0)) return undefined;
  return Array.from(bytes, (byte) => byte.toString(16).padStart(2, '0')).join('');
}

async function readBlocks(
  read: ReadBytes,
  fileBytes: number,
): Promise<{ metadata: MetadataField[]; audioOffset: number }> {
  const metadata: MetadataField[] = [];
  let at = 4;
  for (let count = 0; count < MAX_BLOCKS && at + 4 <= fileBytes; count++) {
    const block = blockAt(await read(at, 4), at);
    metadata.push(...(await blockFields(read, block)));
    at = block.offset + block.sizeBytes;
    if (block.isLast) return { metadata, audioOffset: at };
  }
  throw new RefusedFileError('no-data', 'The FLAC file breaks off, or goes astray, before its audio begins.');
}

function blockAt(head: Uint8Array, at: number): Block {
  const view = new DataView(head.buffer, head.byteOffset, head.byteLength);
  return {
    type: head[0]! & 0x7f,
    isLast: head[0]! >= 0x80,
    offset: at + 4,
    sizeBytes: view.getUint32(0) & 0xffffff,
  };
}

async function blockFields(read: ReadBytes, { type, offset, sizeBytes }: Block): Promise<MetadataField[]> {
  if (type === VORBIS_COMMENT) {
    const body = (await read(offset, Math.min(sizeBytes, MAX_TEXT_BYTES))).slice();
    const rest = sizeBytes - body.length;
    return [...commentFields(body), ...unreadField('Vorbis', rest)];
  }
  return unreadField(BLOCK_NAMES[type], sizeBytes);
}

function unreadField(chunk: string | undefined, bytes: number): MetadataField[] {
  return chunk === undefined || bytes === 0 ? [] : [{ chunk, key: UNREAD_KEY, value: `${bytes} bytes` }];
}

/** Texts `NAME=value`, each behind its length, after the name of the program (RFC 9639, 8.6). */
function commentFields(body: Uint8Array): MetadataField[] {
  const view = new DataView(body.buffer, body.byteOffset, body.byteLength);
  const texts: string[] = [];
  let at = 0;
  while (at + 4 <= body.length && texts.length <= MAX_COMMENTS) {
    const sizeBytes = view.getUint32(at, true);
    texts.push(decodeText(body.subarray(at + 4, at + 4 + sizeBytes)));
    at += 4 + sizeBytes;
    // The number of texts stands after the first one.
    if (texts.length === 1) at += 4;
  }
  return presentFields(
    texts.map((text, n) => (n === 0 ? metadataField('Vorbis', 'program', text) : commentField(text))),
  );
}

function commentField(text: string): MetadataField | undefined {
  const equals = text.indexOf('=');
  return metadataField('Vorbis', text.slice(0, Math.max(0, equals)).toUpperCase(), text.slice(equals + 1));
}

async function countFrames(
  source: ByteSource,
  info: StreamInfo,
  audioOffset: number,
): Promise<{ frames: number; warnings: string[] }> {
  const wanted = Math.min(MOST_TAIL_BYTES, Math.max(LEAST_TAIL_BYTES, 2 * info.maxFrameBytes));
  const from = Math.max(audioOffset, source.sizeBytes - wanted);
  const tail = from < source.sizeBytes ? await source.read(from, source.sizeBytes - from) : new Uint8Array(0);
  const last = lastFlacFrame(tail, info);
  if (!last)
    throw new RefusedFileError(
      'no-frames',
      'The FLAC file holds not a single whole frame of audio as its header describes it.',
    );
  const present = last.startFrame + last.frames;
  const { totalFrames } = info;
  if (totalFrames === 0) return { frames: present, warnings: [] };
  return present >= totalFrames
    ? { frames: totalFrames, warnings: [] }
    : { frames: present, warnings: [cutShortWarning(present, totalFrames)] };
}

/** What is told of a FLAC file that ends before the length that its header gives. */
export function cutShortWarning(frames: number, totalFrames: number): string {
  const missing = totalFrames - frames;
  const share = Number(((100 * missing) / totalFrames).toPrecision(2));
  return `The file is cut short: ${missing.toLocaleString('en')} frames of audio are missing (${share} % of what its header says). The ${frames.toLocaleString('en')} that are there were taken.`;
}
