/** What the frame headers of one FLAC file have in common, as its first block tells it. */
export type FlacStream = {
  sampleRateHz: number;
  bitsPerSample: number;
  channels: number;
  maxBlockFrames: number;
};

/** The samples that one FLAC frame holds, counted in frames of all channels. */
export type FlacSpan = { startFrame: number; frames: number };

const LONGEST_HEADER_BYTES = 16;
const BITS_BY_CODE = [undefined, 8, 12, undefined, 16, 20, 24, 32];
const HERTZ_BY_CODE = [
  undefined,
  88_200,
  176_400,
  192_000,
  8000,
  16_000,
  22_050,
  24_000,
  32_000,
  44_100,
  48_000,
  96_000,
];

/**
 * The frame header (RFC 9639, 9.1) that begins at `at`; `undefined` where none does: no sync code, a wrong checksum, or another
 * rate, width, number of channels or length than the file's. Chance passes all of these about once in a thousand million places.
 */
export function flacFrameAt(bytes: Uint8Array, at: number, stream: FlacStream): FlacSpan | undefined {
  const head = bytes.subarray(at, at + LONGEST_HEADER_BYTES);
  if (head.length < 6 || head[0] !== 0xff || (head[1]! & 0xfe) !== 0xf8) return undefined;
  if (!fitsStream(head, stream)) return undefined;
  const number = codedNumber(head);
  const frames = number && blockFrames(head, number.end);
  if (!frames || frames.count > stream.maxBlockFrames) return undefined;
  const rate = frameRate(head, frames.end, stream.sampleRateHz);
  if (rate.rateHz !== stream.sampleRateHz) return undefined;
  const { end } = rate;
  if (end >= head.length || crc8(head.subarray(0, end)) !== head[end]) return undefined;
  const isVariable = (head[1]! & 1) === 1;
  const startFrame = isVariable ? number.value : number.value * stream.maxBlockFrames;
  return { startFrame, frames: frames.count };
}

/** The last frame header in `bytes`, looked for from their end. */
export function lastFlacFrame(bytes: Uint8Array, stream: FlacStream): FlacSpan | undefined {
  for (let at = bytes.length - 6; at >= 0; at--) {
    const span = bytes[at] === 0xff ? flacFrameAt(bytes, at, stream) : undefined;
    if (span) return span;
  }
  return undefined;
}

function fitsStream(head: Uint8Array, { bitsPerSample, channels }: FlacStream): boolean {
  const channelCode = head[3]! >> 4;
  const bitsCode = (head[3]! >> 1) & 7;
  const headChannels = channelCode < 8 ? channelCode + 1 : channelCode < 11 ? 2 : 0;
  const isReservedUnset = (head[3]! & 1) === 0 && (head[2]! & 0x0f) !== 0x0f;
  const fitsBits = bitsCode === 0 || BITS_BY_CODE[bitsCode] === bitsPerSample;
  return isReservedUnset && headChannels === channels && fitsBits;
}

/** A number as UTF-8 would code it, in up to seven bytes (RFC 9639, 9.1.5), from byte 4. */
function codedNumber(head: Uint8Array): { value: number; end: number } | undefined {
  const lead = head[4]!;
  if (lead < 0x80) return { value: lead, end: 5 };
  const length = Math.clz32(~(lead << 24));
  if (length < 2 || length > 7) return undefined;
  let value = lead & (0x7f >> length);
  for (let i = 1; i < length; i++) {
    const next = head[4 + i];
    if (next === undefined || (next & 0xc0) !== 0x80) return undefined;
    value = value * 64 + (next & 0x3f);
  }
  return { value, end: 4 + length };
}

function blockFrames(head: Uint8Array, at: number): { count: number; end: number } | undefined {
  const code = head[2]! >> 4;
  if (code === 0) return undefined;
  if (code === 1) return { count: 192, end: at };
  if (code < 6) return { count: 144 << code, end: at };
  if (code >= 8) return { count: 1 << code, end: at };
  const bytes = code - 5;
  if (at + bytes > head.length) return undefined;
  const count = bytes === 1 ? head[at]! : head[at]! * 256 + head[at + 1]!;
  return { count: count + 1, end: at + bytes };
}

/** Code 0 leaves the rate to the start of the file; 12 to 14 put it behind the header in kHz, Hz or tens of Hz. */
function frameRate(head: Uint8Array, at: number, streamHz: number): { rateHz: number; end: number } {
  const code = head[2]! & 0x0f;
  if (code === 0) return { rateHz: streamHz, end: at };
  if (code < 12) return { rateHz: HERTZ_BY_CODE[code]!, end: at };
  if (code === 12) return { rateHz: (head[at] ?? 0) * 1000, end: at + 1 };
  const number = (head[at] ?? 0) * 256 + (head[at + 1] ?? 0);
  return { rateHz: code === 13 ? number : number * 10, end: at + 2 };
}

/** Polynomial x^8 + x^2 + x + 1, from zero. */
function crc8(bytes: Uint8Array): number {
  let crc = 0;
  for (const byte of bytes) {
    crc ^= byte;
    for (let bit = 0; bit < 8; bit++) crc = crc & 0x80 ? ((crc << 1) ^ 0x07) & 0xff : crc << 1;
  }
  return crc;
}
