import { z } from 'zod';

/** What the server says about the bytes: read from the header, before anything is computed. */
export const audioFormatSchema = z.object({
  container: z.enum(['RIFF', 'RF64', 'BW64', 'FLAC', 'raw', 'CSV', 'capture-set']),
  encoding: z.enum(['integer', 'float']),
  bitsPerSample: z.number().int(),
  channels: z.number().int().min(1).max(64),
  sampleRateHz: z.number().int().min(1).max(20_000_000),
  frames: z.number().int().min(1),
  extensible: z.boolean(),
  warnings: z.array(z.string()),
});
export type AudioFormat = z.infer<typeof audioFormatSchema>;

/** Levels in dB re full scale; a full-scale sine has rms 0 dB (AES17). `null` where the channel is silent. */
export const channelLevelsSchema = z.object({
  channel: z.number().int().min(0),
  rmsDb: z.number().nullable(),
  peakDb: z.number().nullable(),
  crestDb: z.number().nullable(),
  dcFraction: z.number(),
  clippedSamples: z.number().int(),
  clippedRuns: z.number().int(),
  nonFiniteSamples: z.number().int(),
});
export type ChannelLevels = z.infer<typeof channelLevelsSchema>;

/** Medians over the frames that are not silent; the definitions are meyda's, in hertz where it counts in bins. */
export const channelDescriptorsSchema = z.object({
  channel: z.number().int().min(0),
  centroidHz: z.number().nullable(),
  spreadHz: z.number().nullable(),
  flatness: z.number().nullable(),
  rolloff99AmplitudeHz: z.number().nullable(),
  /** Sign changes per second about the mean: a sine of f Hz has 2 f. */
  zeroCrossingRateHz: z.number().nullable(),
  ultrasonicShare: z.number().nullable(),
});
export type ChannelDescriptors = z.infer<typeof channelDescriptorsSchema>;

export const placeSchema = z.object({
  channel: z.number().int().min(0),
  startSample: z.number().int().min(0),
  endSample: z.number().int().min(0),
});
export type Place = z.infer<typeof placeSchema>;

export const qualityFindingSchema = z.object({
  code: z.enum([
    'clipping',
    'dc',
    'dropout',
    'mains',
    'channels-equal',
    'channels-alike',
    'channel-silent',
    'non-finite',
    'truncated',
    'header',
    'effective-bits',
    'band-limited',
    'lossy-or-converted',
    'speech',
    'joints',
  ]),
  weight: z.enum(['note', 'caution', 'serious']),
  sentence: z.string(),
  count: z.number().int().min(0),
  places: z.array(placeSchema).max(50),
});
export type QualityFinding = z.infer<typeof qualityFindingSchema>;

export const bandwidthSchema = z.object({
  effectiveHz: z.number(),
  edge: z.enum(['none', 'brick-wall']),
  reason: z.string(),
});
export type Bandwidth = z.infer<typeof bandwidthSchema>;

/** A span in which the energy of the observable band stands at least `excessDb` over its quiet floor. */
export const flaggedSpanSchema = placeSchema.extend({ excessDb: z.number() });
export type FlaggedSpan = z.infer<typeof flaggedSpanSchema>;

export const ultrasoundSchema = z.object({
  verdict: z.enum(['not-observable', 'found', 'not-found']),
  reason: z.string(),
  bandLowHz: z.number().nullable(),
  bandHighHz: z.number().nullable(),
  /** Share of the energy in the band that sensor and rate can see that lies above 20 kHz; `null` where it begins there. */
  energyShare: z.number().nullable(),
  /** The same for the bursts alone, noise subtracted; `null` without bursts. */
  burstEnergyShare: z.number().nullable(),
  spanCount: z.number().int(),
  spans: z.array(flaggedSpanSchema).max(1000),
  candidates: z.object({
    total: z.number().int(),
    below: z.number().int(),
    across: z.number().int(),
    above: z.number().int(),
    expectedByChance: z.number(),
  }),
});
export type Ultrasound = z.infer<typeof ultrasoundSchema>;

/** Through the recording: at most 1,000 equal steps, `null` in silence; of several channels the loudest at each step. */
export const courseSchema = z.object({
  samplesPerStep: z.number().int().min(1),
  levelDb: z.array(z.number().nullable()).max(1000),
  ultrasonicDb: z.array(z.number().nullable()).max(1000),
  candidates: z.array(z.number().int()).max(1000),
});
export type Course = z.infer<typeof courseSchema>;

/** A stretch in which candidates are frequent: `ratePerS` over all of it, and how many noise alone may have given there. */
export const activeSpanSchema = z.object({
  startSample: z.number().int().min(0),
  endSample: z.number().int().min(0),
  candidates: z.number().int(),
  ratePerS: z.number(),
  expectedByChance: z.number(),
});
export type ActiveSpan = z.infer<typeof activeSpanSchema>;

/** What a channel holds, whoever stored it how. */
export const channelContentSchema = z.object({
  channel: z.number().int().min(0),
  /** Bits per sample that carry something; `null` where the samples do not tell. */
  effectiveBits: z.number().nullable(),
  /** Hash of the samples as float32 re full scale, by the definition `pcm-1`: the same under every header. */
  pcmSha256: z.string(),
});
export type ChannelContent = z.infer<typeof channelContentSchema>;

export const measurementSummarySchema = z.object({
  version: z.literal(1),
  format: audioFormatSchema,
  levels: z.array(channelLevelsSchema),
  descriptors: z.array(channelDescriptorsSchema),
  quality: z.array(qualityFindingSchema),
  bandwidth: bandwidthSchema,
  contents: z.array(channelContentSchema).default([]),
  ultrasonic: ultrasoundSchema,
  course: courseSchema,
  /** By rising start; none in measurements made before these were found. */
  activeSpans: z.array(activeSpanSchema).max(50).default([]),
  detector: z.object({
    version: z.string(),
    settings: z.record(z.string(), z.union([z.number(), z.string()])),
  }),
});
export type MeasurementSummary = z.infer<typeof measurementSummarySchema>;

/**
 * A third octave (IEC 61260-1, exact mid-band frequency) over time, levels by AES17: what nine frames of ten exceed, the median,
 * the mean power and the highest frame. `null` where it carries nothing.
 */
export const bandLevelSchema = z.object({
  lowHz: z.number(),
  middleHz: z.number(),
  highHz: z.number(),
  floorDb: z.number().nullable(),
  medianDb: z.number().nullable(),
  meanDb: z.number().nullable(),
  maximumDb: z.number().nullable(),
});
export type BandLevel = z.infer<typeof bandLevelSchema>;

/**
 * Power densities on one axis, dB re full scale squared per hertz: the integral over frequency is the mean square, which is 0.5
 * for a full-scale sine. Quiet and active are means over the frames with least and most energy; median, mean and maximum are over
 * all frames. The bands come by rising frequency, as far as the frames tell them apart. Views made before these were measured
 * have none of the last.
 */
export const spectrumSchema = z.object({
  channel: z.number().int().min(0),
  frequenciesHz: z.array(z.number()),
  quietDbPerHz: z.array(z.number()),
  activeDbPerHz: z.array(z.number()).nullable(),
  maximumDbPerHz: z.array(z.number()),
  medianDbPerHz: z.array(z.number()).default([]),
  meanDbPerHz: z.array(z.number()).default([]),
  bands: z.array(bandLevelSchema).default([]),
});
export type Spectrum = z.infer<typeof spectrumSchema>;

/** Burst parameters by the definitions of ASTM E1316 and ISO 12716; voltage forms only where full scale in volts is known. */
export const burstParametersSchema = z.object({
  onsetSample: z.number().int().min(0),
  endSample: z.number().int().min(0),
  peakSample: z.number().int().min(0),
  onsetUncertaintyUs: z.number().nullable(),
  peakDb: z.number().nullable(),
  peakDbAe: z.number().nullable(),
  riseTimeUs: z.number(),
  durationUs: z.number(),
  counts: z.number().int(),
  /** Integral of the squared signal, full scale squared times seconds. */
  energyFs2S: z.number(),
  energyV2S: z.number().nullable(),
  rmsDb: z.number().nullable(),
  averageFrequencyHz: z.number().nullable(),
  raMsPerV: z.number().nullable(),
  peakFrequencyHz: z.number().nullable(),
  centroidHz: z.number().nullable(),
  /** Noise-subtracted share of the burst's energy above 20 kHz; `null` where nothing above 20 kHz can be seen. */
  ultrasonicShare: z.number().nullable(),
  hearingClass: z.enum(['below', 'across', 'above', 'unknown']),
  snrDb: z.number().nullable(),
  clipped: z.boolean(),
});
export type BurstParameters = z.infer<typeof burstParametersSchema>;

export const detectedCandidateSchema = burstParametersSchema.extend({
  channel: z.number().int().min(0),
  channels: z.array(z.number().int().min(0)),
  /**
   * How often its energy rises by 6 dB and more from onset to end, the onset counted: 1 for a single burst; overlapping ones
   * that cannot be parted are one with more, their density being rises over duration. 1 in lists made before this was counted.
   */
  rises: z.number().int().min(1).default(1),
  /** The band in which it stood out and was measured. */
  bandLowHz: z.number(),
  bandHighHz: z.number(),
});
export type DetectedCandidate = z.infer<typeof detectedCandidateSchema>;
