import { bytesPerFrame, type SampleLayout } from './audio-format.ts';

export type WavChunk = { id: string; body: Uint8Array };

export type WavEnvelopeInput = SampleLayout & {
  sampleRateHz: number;
  frames: number;
  container?: 'RIFF' | 'RF64' | 'BW64';
  extensible?: boolean;
  /** Bits that carry signal, for an extensible header. */
  validBits?: number;
  chunksBefore?: WavChunk[];
  chunksAfter?: WavChunk[];
};

const SUBTYPE_TAIL = [0, 0, 0, 0, 0x10, 0, 0x80, 0, 0, 0xaa, 0, 0x38, 0x9b, 0x71];
const SIZE_ELSEWHERE = 0xffffffff;

/** The bytes of a WAV file before and after its samples, so that the samples can be written as they are made. */
export function wavEnvelope(input: WavEnvelopeInput): { head: Uint8Array; tail: Uint8Array } {
  const dataBytes = input.frames * bytesPerFrame(input);
  const isWide = (input.container ?? 'RIFF') !== 'RIFF';
  const format = chunkBytes({ id: 'fmt ', body: formatBody(input) });
  const before = (input.chunksBefore ?? []).map(chunkBytes);
  const tail = concatBytes([new Uint8Array(dataBytes % 2), ...(input.chunksAfter ?? []).map(chunkBytes)]);
  const dataHead = concatBytes([asciiBytes('data'), uint32(isWide ? SIZE_ELSEWHERE : dataBytes)]);
  const middle = concatBytes([format, ...before, dataHead]);
  const wideBytes = isWide ? 36 : 0;
  const riffBytes = 4 + wideBytes + middle.length + dataBytes + tail.length;
  const wide = isWide ? wideSizesChunk(riffBytes, dataBytes, input.frames) : new Uint8Array(0);
  const riff = [
    asciiBytes(input.container ?? 'RIFF'),
    uint32(isWide ? SIZE_ELSEWHERE : riffBytes),
    asciiBytes('WAVE'),
  ];
  return { head: concatBytes([...riff, wide, middle]), tail };
}

/** A chunk with its head and, where its size is odd, the byte that follows it. */
export function chunkBytes({ id, body }: WavChunk): Uint8Array {
  return concatBytes([asciiBytes(id), uint32(body.length), body, new Uint8Array(body.length % 2)]);
}

export function concatBytes(parts: Uint8Array[]): Uint8Array<ArrayBuffer> {
  const whole = new Uint8Array(parts.reduce((total, part) => total + part.length, 0));
  let at = 0;
  for (const part of parts) {
    whole.set(part, at);
    at += part.length;
  }
  return whole;
}

export function asciiBytes(text: string): Uint8Array {
  return Uint8Array.from(text, (character) => character.charCodeAt(0));
}

export function uint32(value: number): Uint8Array {
  const bytes = new Uint8Array(4);
  new DataView(bytes.buffer).setUint32(0, value, true);
  return bytes;
}

function formatBody(input: WavEnvelopeInput): Uint8Array {
  const tag = input.encoding === 'float' ? 3 : 1;
  const body = new Uint8Array(input.extensible ? 40 : 16);
  const view = new DataView(body.buffer);
  view.setUint16(0, input.extensible ? 0xfffe : tag, true);
  view.setUint16(2, input.channels, true);
  view.setUint32(4, input.sampleRateHz, true);
  view.setUint32(8, input.sampleRateHz * bytesPerFrame(input), true);
  view.setUint16(12, bytesPerFrame(input), true);
  view.setUint16(14, input.bitsPerSample, true);
  if (!input.extensible) return body;
  view.setUint16(16, 22, true);
  view.setUint16(18, input.validBits ?? input.bitsPerSample, true);
  view.setUint16(24, tag, true);
  body.set(SUBTYPE_TAIL, 26);
  return body;
}

/** EBU Tech 3306, 3.3: sizes of the file and of the audio, sample count, an empty table. */
function wideSizesChunk(riffBytes: number, dataBytes: number, frames: number): Uint8Array {
  const body = new Uint8Array(28);
  const view = new DataView(body.buffer);
  [riffBytes, dataBytes, frames].forEach((value, i) => view.setBigUint64(i * 8, BigInt(value), true));
  return chunkBytes({ id: 'ds64', body });
}
