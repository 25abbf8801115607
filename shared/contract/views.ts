import { z } from 'zod';
import { spectrumSchema } from './measurement.ts';

/** The two pictures of a recording: what can be heard, and what lies above the hearing line at 20 kHz. */
export const pictureBandSchema = z.enum(['audible', 'ultrasonic']);
export type PictureBand = z.infer<typeof pictureBandSchema>;

/** Levels below 0 are made of shorter frames: -1 to this at most. */
export const mostFinerLevels = 8;

/**
 * One picture: `columns` at level 0; level n has a quarter of the columns of level n - 1, by maximum. Level -n has four times
 * the columns of level 1 - n, made of frames half as long, down to `-finerLevels`; its bins are the same.
 */
export const pictureLayoutSchema = z.object({
  band: pictureBandSchema,
  /** Lower edge of the lowest bin and upper edge of the highest; the bins between are equally wide. */
  lowHz: z.number(),
  highHz: z.number(),
  bins: z.number().int().min(1).max(512),
  samplesPerColumn: z.number().int().min(1),
  columns: z.number().int().min(1),
  columnsPerTile: z.number().int().min(1),
  levels: z.number().int().min(1),
  /** Samples of the frames of level 0. */
  frameSamples: z.number().int().min(1),
  finerLevels: z.number().int().min(0).max(mostFinerLevels),
});
export type PictureLayout = z.infer<typeof pictureLayoutSchema>;

/** Without an entry for a band, the sample rate leaves nothing of it to show. */
export const tileLayoutSchema = z.object({
  sampleRateHz: z.number().int(),
  frames: z.number().int(),
  channels: z.number().int(),
  pictures: z.array(pictureLayoutSchema),
});
export type TileLayout = z.infer<typeof tileLayoutSchema>;

/** What is quiet in a picture: for each level, the code of each bin as the tiles have them. */
export const pictureQuietSchema = z.object({
  band: pictureBandSchema,
  levels: z.array(z.object({ level: z.number().int(), codes: z.array(z.number().int().min(0).max(255)) })),
});
export type PictureQuiet = z.infer<typeof pictureQuietSchema>;

export const quietLevelsSchema = z.object({
  channel: z.number().int().min(0),
  pictures: z.array(pictureQuietSchema),
});
export type QuietLevels = z.infer<typeof quietLevelsSchema>;

export const peaksSchema = z.object({
  channel: z.number().int().min(0),
  startSample: z.number().int().min(0),
  samplesPerPoint: z.number().int().min(1),
  minimum: z.array(z.number()),
  maximum: z.array(z.number()),
});
export type Peaks = z.infer<typeof peaksSchema>;

export const channelSchema = z.coerce.number().int().min(0).max(63).default(0);

/** `endSample` is exclusive; without it, to the end of the recording. */
export const peaksQuerySchema = z.object({
  channel: channelSchema,
  startSample: z.coerce.number().int().min(0).default(0),
  endSample: z.coerce.number().int().min(1).optional(),
  points: z.coerce.number().int().min(1).max(8192).default(2048),
});
export type PeaksQuery = z.infer<typeof peaksQuerySchema>;

export const tileParamsSchema = z.object({
  band: pictureBandSchema,
  level: z.coerce.number().int().min(-mostFinerLevels).max(20),
  tile: z.coerce.number().int().min(0),
});
export const channelQuerySchema = z.object({ channel: channelSchema });

export const spectrumResponseSchema = spectrumSchema;
