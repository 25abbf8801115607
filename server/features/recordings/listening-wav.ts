const headBytes = 44;

/** 16-bit mono WAV of samples at full scale 1. */
export function encodeMonoWav(samples: Float32Array, sampleRateHz: number): Uint8Array {
  const dataBytes = samples.length * 2;
  const bytes = new Uint8Array(headBytes + dataBytes);
  const view = new DataView(bytes.buffer);
  const writeText = (at: number, text: string) => bytes.set(Buffer.from(text, 'latin1'), at);
  writeText(0, 'RIFF');
  view.setUint32(4, headBytes - 8 + dataBytes, true);
  writeText(8, 'WAVEfmt ');
  view.setUint32(16, 16, true);
  view.setUint16(20, 1, true);
  view.setUint16(22, 1, true);
  view.setUint32(24, sampleRateHz, true);
  view.setUint32(28, sampleRateHz * 2, true);
  view.setUint16(32, 2, true);
  view.setUint16(34, 16, true);
  writeText(36, 'data');
  view.setUint32(40, dataBytes, true);
  for (let n = 0; n < samples.length; n++) view.setInt16(headBytes + 2 * n, toInt16(samples[n]!), true);
  return bytes;
}

function toInt16(sample: number): number {
  return Math.max(-32_768, Math.min(32_767, Math.round(sample * 32_768)));
}
