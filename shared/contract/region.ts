import { z } from 'zod';

/** Longest span that is measured at once. */
export const longestRegionSamples = 4_000_000;

export const regionQuerySchema = z
  .object({
    channel: z.coerce.number().int().min(0).max(63).default(0),
    startSample: z.coerce.number().int().min(0),
    /** Exclusive. */
    endSample: z.coerce.number().int().min(1),
  })
  .refine((span) => span.endSample > span.startSample, {
    path: ['endSample'],
    message: 'must lie after the start',
  })
  .refine((span) => span.endSample - span.startSample <= longestRegionSamples, {
    path: ['endSample'],
    message: `is too far: at most ${longestRegionSamples.toLocaleString('en')} samples are measured at once`,
  });
export type RegionQuery = z.infer<typeof regionQuerySchema>;

/** A power density and how it was made. */
export const regionSpectrumSchema = z.object({
  /** `welch`: the mean over frames that overlap by half; `single-frame`: the span is one frame. */
  method: z.enum(['welch', 'single-frame']),
  frameSamples: z.number().int(),
  averages: z.number().int(),
  /** The first line stands at once this frequency. */
  binHz: z.number(),
  /** dB re full scale squared per hertz. */
  densityDbPerHz: z.array(z.number()),
});
export type RegionSpectrumAnswer = z.infer<typeof regionSpectrumSchema>;

/** Levels in dB re full scale (a full-scale sine has an rms of 0 dB); `null` where silence has no value. */
export const regionFiguresSchema = z.object({
  startSample: z.number().int(),
  endSample: z.number().int(),
  durationS: z.number(),
  rmsDb: z.number().nullable(),
  peakDb: z.number().nullable(),
  crestDb: z.number().nullable(),
  /** Of the energy, as this sensor sees it. */
  shareAbove20kHz: z.number().nullable(),
  peakFrequencyHz: z.number().nullable(),
  centroidHz: z.number().nullable(),
  /** `null` for fewer than eight samples. */
  spectrum: regionSpectrumSchema.nullable(),
});
export type RegionFigures = z.infer<typeof regionFiguresSchema>;

export const regionReportSchema = z.object({
  channel: z.number().int(),
  region: regionFiguresSchema,
  /** The same of a quiet stretch of the channel, for comparison. */
  quiet: regionFiguresSchema.nullable(),
});
export type RegionReport = z.infer<typeof regionReportSchema>;
