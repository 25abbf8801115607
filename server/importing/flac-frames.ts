import { createReadStream } from 'node:fs';
import { FLACDecoder } from '@wasm-audio-decoders/flac';
import CodecParser, { type CodecFrame } from 'codec-parser';
import { flacFrameAt, type FlacStream } from '../../shared/audio/flac-frame-header.ts';

export interface FlacBlock {
  /** Place of its first frame in the whole, as its own header tells it. */
  startFrame: number;
  /** One array per channel, in steps of one code. */
  channels: Int32Array[];
  frames: number;
  /** Bytes of the file that have been read. */
  bytesRead: number;
}

/** A frame that cannot be decoded; those before it were. */
export class BrokenFlacError extends Error {
  constructor() {
    super('The FLAC file is damaged: one of its frames cannot be decoded.');
    this.name = 'BrokenFlacError';
  }
}

const PIECE_BYTES = 64 * 1024;
const STREAM_HEAD_BYTES = 42;
const LAST_BLOCK_FLAG = 0x80;

/**
 * The frames of a FLAC file as exact integers, one block at a time: however long the file is and however much a frame unpacks to,
 * no more than one frame is held.
 *
 * The decoder package divides codes of n bits by 2^(n-1) - 1 and rounds to 32-bit floats. For n up to 24 the neighbours stay
 * apart by two units of the last place at least, so that rounding gives back the code.
 */
export async function* flacBlocks(filePath: string, stream: FlacStream): AsyncGenerator<FlacBlock> {
  const decoder = new FLACDecoder();
  await decoder.ready;
  try {
    const parser = new CodecParser<CodecFrame>('audio/flac', { enableFrameCRC32: false });
    let bytesRead = 0;
    for await (const piece of readPieces(filePath)) {
      // Rates past 655,350 Hz stand in the stream info alone, which the decoder gets as if it were all of the metadata.
      if (bytesRead === 0) await decoder.decodeFrames([streamHead(piece)]);
      bytesRead += piece.length;
      for (const frame of iterated(parser.parseChunk(piece))) {
        yield { ...(await decodeFrame(decoder, frame, stream)), bytesRead };
      }
    }
    for (const frame of iterated(parser.flush())) {
      yield { ...(await decodeFrame(decoder, frame, stream)), bytesRead };
    }
  } finally {
    decoder.free();
  }
}

async function* readPieces(filePath: string): AsyncGenerator<Uint8Array> {
  const stream: AsyncIterable<Buffer> = createReadStream(filePath, { highWaterMark: PIECE_BYTES });
  for await (const piece of stream) yield new Uint8Array(piece);
}

function streamHead(firstPiece: Uint8Array): Uint8Array {
  const head = firstPiece.slice(0, STREAM_HEAD_BYTES);
  head[4]! |= LAST_BLOCK_FLAG;
  return head;
}

/** The parser promises an iterator and gives an iterable one; only what it promises is used. */
function* iterated<Item>(iterator: Iterator<Item>): Generator<Item> {
  for (let next = iterator.next(); next.done !== true; next = iterator.next()) yield next.value;
}

async function decodeFrame(
  decoder: FLACDecoder,
  { data }: CodecFrame,
  stream: FlacStream,
): Promise<Omit<FlacBlock, 'bytesRead'>> {
  const span = flacFrameAt(data, 0, stream);
  const { channelData, samplesDecoded, errors } = await decoder.decodeFrames([data]);
  if (errors.length > 0 || samplesDecoded !== span?.frames) throw new BrokenFlacError();
  const scale = 2 ** (stream.bitsPerSample - 1) - 1;
  return { ...span, channels: channelData.map((samples) => toCodes(samples, scale)) };
}

function toCodes(samples: Float32Array, scale: number): Int32Array {
  const codes = new Int32Array(samples.length);
  // Adding and cutting off costs a third of Math.round; no code lies at a half.
  for (let i = 0; i < codes.length; i++) codes[i] = Math.floor(samples[i]! * scale + 0.5);
  return codes;
}
