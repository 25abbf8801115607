import { bytesPerFrame, type SampleLayout } from './audio-format.ts';
import { frequencyText } from './unit-text.ts';
import { RefusedFileError } from './refused-file-error.ts';
import { codecName, TAG_EXTENSIBLE, TAG_FLOAT, TAG_PCM } from './wave-codec.ts';

const MAX_CHANNELS = 64;
const MAX_RATE_HZ = 20_000_000;
const PLAIN_BYTES = 16;
const EXTENSIBLE_BYTES = 40;
/** KSDATAFORMAT_SUBTYPE_*: a format tag in the first two bytes, then always these fourteen. */
const SUBTYPE_TAIL = [0, 0, 0, 0, 0x10, 0, 0x80, 0, 0, 0xaa, 0, 0x38, 0x9b, 0x71];
const WIDTHS = { integer: [8, 16, 24, 32], float: [32, 64] };

export type FormatChunk = SampleLayout & {
  sampleRateHz: number;
  blockAlign: number;
  extensible: boolean;
  /** Bits of each sample that carry signal; the same as the width unless the header says less. */
  validBits: number;
  warnings: string[];
};

/** Reads and checks the body of a `fmt ` chunk (WAVEFORMATEX, WAVEFORMATEXTENSIBLE). Throws RefusedFileError. */
export function parseFormatChunk(body: Uint8Array): FormatChunk {
  if (body.length < PLAIN_BYTES) {
    throw new RefusedFileError(
      'broken-format',
      `The format chunk has ${body.length} bytes; a WAV file needs at least 16.`,
    );
  }
  const view = new DataView(body.buffer, body.byteOffset, body.byteLength);
  const outerTag = view.getUint16(0, true);
  const extensible = outerTag === TAG_EXTENSIBLE;
  const encoding = encodingOf(extensible ? extensibleTag(body, view) : outerTag);
  const layout = { encoding, bitsPerSample: view.getUint16(14, true), channels: view.getUint16(2, true) };
  const sampleRateHz = view.getUint32(4, true);
  requireBounds(layout, sampleRateHz);
  const blockAlign = requireBlockAlign(layout, view.getUint16(12, true));
  const validBits = extensible ? validBitsOf(view, layout.bitsPerSample) : layout.bitsPerSample;
  const warnings = formatWarnings(
    { ...layout, sampleRateHz, blockAlign, validBits },
    view.getUint32(8, true),
  );
  return { ...layout, sampleRateHz, blockAlign, extensible, validBits, warnings };
}

function extensibleTag(body: Uint8Array, view: DataView): number {
  if (body.length < EXTENSIBLE_BYTES || view.getUint16(16, true) < 22) {
    throw new RefusedFileError(
      'broken-format',
      'The header says its format is extended but the extension is missing or cut off, so the coding of the samples is unknown.',
    );
  }
  if (!SUBTYPE_TAIL.every((byte, i) => body[26 + i] === byte)) {
    throw new RefusedFileError(
      'compressed',
      'The header names a sub-format that is neither integer nor float samples. Save the file as uncompressed WAV.',
    );
  }
  return view.getUint16(24, true);
}

function encodingOf(tag: number): 'integer' | 'float' {
  if (tag === TAG_PCM) return 'integer';
  if (tag === TAG_FLOAT) return 'float';
  throw new RefusedFileError(
    'compressed',
    `The samples are coded with ${codecName(tag)}. Only uncompressed integer or float samples can be measured: bring in the WAV file from the recorder.`,
  );
}

function requireBounds(layout: SampleLayout, sampleRateHz: number): void {
  const { encoding, bitsPerSample, channels } = layout;
  if (!WIDTHS[encoding].includes(bitsPerSample)) {
    const widths = encoding === 'integer' ? '8, 16, 24 or 32 bits' : '32 or 64 bits';
    throw new RefusedFileError(
      'width',
      `The header says ${encoding} samples of ${bitsPerSample} bits; ${encoding} samples must have ${widths}.`,
    );
  }
  if (channels < 1 || channels > MAX_CHANNELS) {
    throw new RefusedFileError(
      'channels',
      `The header says ${channels} channels; 1 to ${MAX_CHANNELS} can be brought in.`,
    );
  }
  if (sampleRateHz < 1 || sampleRateHz > MAX_RATE_HZ) {
    throw new RefusedFileError(
      'rate',
      `The header says a sample rate of ${frequencyText(sampleRateHz)}; 1 Hz to ${frequencyText(MAX_RATE_HZ)} can be brought in.`,
    );
  }
}

function requireBlockAlign(layout: SampleLayout, blockAlign: number): number {
  const expected = bytesPerFrame(layout);
  if (blockAlign === expected) return blockAlign;
  throw new RefusedFileError(
    'block-align',
    `The header contradicts itself: ${layout.channels} channels of ${layout.bitsPerSample} bits make ${expected} bytes a frame, but it says ${blockAlign}.`,
  );
}

function validBitsOf(view: DataView, bitsPerSample: number): number {
  const validBits = view.getUint16(18, true);
  if (validBits === 0) return bitsPerSample;
  if (validBits <= bitsPerSample) return validBits;
  throw new RefusedFileError(
    'width',
    `The header says that ${validBits} bits of each sample are valid, but a sample has only ${bitsPerSample}.`,
  );
}

type Checked = SampleLayout & { sampleRateHz: number; blockAlign: number; validBits: number };

function formatWarnings(format: Checked, byteRate: number): string[] {
  const warnings: string[] = [];
  if (format.validBits < format.bitsPerSample) {
    warnings.push(
      `Only ${format.validBits} of the ${format.bitsPerSample} bits of each sample carry signal, as the header says.`,
    );
  }
  const expected = format.sampleRateHz * format.blockAlign;
  // The field has 32 bits; many channels at a high rate do not fit and prove nothing.
  if (byteRate !== expected && expected <= 0xffffffff) {
    warnings.push(
      `The header's byte rate is ${byteRate}; its other fields make ${expected}, which was used.`,
    );
  }
  return warnings;
}
