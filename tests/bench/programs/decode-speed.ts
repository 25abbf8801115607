import wavDecoder from 'wav-decoder';
import { kernelEngine } from '../../../server/kernel/kernel-engine.ts';
import { encodeFrames } from '../../../server/setup/demo-audio/encode-frames.ts';
import { concatBytes, wavEnvelope } from '../../../shared/audio/wav-envelope.ts';
import { Scene } from '../kit/scene.ts';
import { cpuOf, writeFindings } from './write-findings.ts';

// CPU nanoseconds per sample of decoding 24 bits, by wav-decoder and by the engine. Argument: rounds.
const FRAMES = 1 << 21;
const PIECE_BYTES = 1 << 20;
const layout = { encoding: 'integer', bitsPerSample: 24, channels: 1 } as const;
const sampleRateHz = 192_000;

const scene = new Float32Array(FRAMES);
new Scene(sampleRateHz, 5).next(scene);
const bytes = encodeFrames([scene], layout);
const { head } = wavEnvelope({ ...layout, sampleRateHz, frames: FRAMES });
const file = concatBytes([head, bytes]).buffer;

const stride = layout.bitsPerSample / 8;
const pieceFrames = Math.floor(PIECE_BYTES / stride);
const engine = kernelEngine();
const samples = engine.samples(pieceFrames);
const decode = engine.decoder(layout, pieceFrames * stride);

function byEngine(): void {
  for (let from = 0; from < FRAMES; from += pieceFrames) {
    decode(bytes.subarray(from * stride, (from + pieceFrames) * stride), [samples.values]);
  }
}

function byWavDecoder(): void {
  wavDecoder.decode.sync(file);
}

byEngine();
byWavDecoder();
const engineNs: number[] = [];
const wavDecoderNs: number[] = [];
for (let round = 0; round < Number(process.argv[2]); round++) {
  engineNs.push(((await cpuOf(byEngine)) * 1000) / FRAMES);
  wavDecoderNs.push(((await cpuOf(byWavDecoder)) * 1000) / FRAMES);
}
writeFindings({ engineNs, wavDecoderNs });
