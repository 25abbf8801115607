/** What a kind of frame needs, in memory as one word of 4 bytes per field; addresses unless said otherwise. */
@unmanaged
export class FramePlan {
  /** N, samples per frame. */
  size: i32;
  /** N weights, divided by their sum. */
  window: i32;
  twiddles: i32;
  turns: i32;
  /** Two buffers of N x 16 bytes. */
  work: i32;
  otherWork: i32;
  /** (N / 2 + 4) x 16 bytes; the last 4 bins stay zero. */
  lanes: i32;
  /** 5 sums of hops, 32 bytes each. */
  hops: i32;
  /** 48 bytes for each 64 bins and 48 more. */
  blocks: i32;
  /** Bin (a number) from which energy counts as ultrasonic, N / 2 where the rate sees none. */
  ultrasonicBin: i32;
  /** Hertz from bin to bin, a float. */
  binHz: f32;
  /** Number of mel bands; 12 bytes each: first bin, number of weights (even), address of the weights. */
  melCount: i32;
  melBands: i32;
  /** Room for the logarithms of the mel bands, 16 bytes each. */
  melLogs: i32;
  /** Number of cepstral coefficients; a row of cosines for each. */
  cepstralCount: i32;
  cosines: i32;
  /** Number of third-octave bands; 16 bytes each: first whole bin, end, share of the bin before, share of the bin at the end. */
  octaveCount: i32;
  octaveBands: i32;
  /** Floats from one row of features to the next. */
  featureStride: i32;
}

export function addressOf(field: i32): usize {
  return usize(u32(field));
}
