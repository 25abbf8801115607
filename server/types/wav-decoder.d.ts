declare module 'wav-decoder' {
  export interface DecodedWav {
    sampleRate: number;
    channelData: Float32Array[];
  }
  export interface DecodeOptions {
    /** Divide integers by the power of two on both sides of zero. */
    symmetric?: boolean;
  }
  interface Decode {
    (source: ArrayBuffer | Uint8Array, options?: DecodeOptions): Promise<DecodedWav>;
    sync(source: ArrayBuffer | Uint8Array, options?: DecodeOptions): DecodedWav;
  }
  const wavDecoder: { decode: Decode };
  export default wavDecoder;
}
