import type {
  Peaks,
  PeaksQuery,
  PictureBand,
  QuietLevels,
  TileLayout,
} from '../../../shared/contract/views.ts';
import type { Spectrum } from '../../../shared/contract/measurement.ts';
import type { Actor } from '../../../shared/policy/actor.ts';
import type { Ground } from '../../ground.ts';
import { conflict, notFound } from '../../http/problem.ts';
import { keptWhileUsed } from '../../services/kept-while-used.ts';
import { createGate } from '../../services/gate.ts';
import { tileLayout } from '../../measuring/view-layout.ts';
import {
  NoSuchViewError,
  readFrameTable,
  type FrameTable,
  readPeaks,
  readQuietLevels,
  readSpectrum,
  readTile,
} from '../../measuring/view-reader.ts';
import { requireSound, type RecordingAccess, type RecordingsService } from './recordings.service.ts';
import { selectNewestMeasurementId, type RecordingRow } from './recordings.queries.ts';
import type { StoredAudioReader } from './stored-audio.ts';
import type { ViewFolders } from './view-folders.ts';

type Parts = Pick<Ground, 'db'> & {
  recordings: RecordingsService;
  viewFolders: ViewFolders;
  readStoredAudio: StoredAudioReader;
};

export interface MeasuredAccess extends RecordingAccess {
  /** Names the version of every view: they are kept under it. */
  measurementId: string;
}

interface TilePlace {
  channel: number;
  band: PictureBand;
  level: number;
  tile: number;
}

/** Quiet levels are a few kilobytes and cost up to a second where frames are long. */
const quietLevelsKept = 200;

export type RecordingViewsService = ReturnType<typeof createRecordingViewsService>;

/** What can be looked at once a recording is measured. */
export function createRecordingViewsService({ db, recordings, viewFolders, readStoredAudio }: Parts) {
  const keptQuiet = keptWhileUsed<QuietLevels>(quietLevelsKept);
  const oneAtATime = createGate(1);

  function requireMeasured(actor: Actor, id: string): MeasuredAccess {
    const access = requireSound(recordings.requireVisible(actor, id));
    const measurementId = selectNewestMeasurementId(db, id);
    if (access.row.processing !== 'measured' || measurementId === undefined) {
      throw conflict('This recording is not measured yet; its views come with the measurement.');
    }
    return { ...access, measurementId };
  }

  async function sourceOf({ row, measurementId }: MeasuredAccess) {
    const { filePath, header } = await readStoredAudio(row);
    return { filePath, header, viewsDir: viewFolders.ofMeasurement(row.id, measurementId) };
  }

  async function peaks(actor: Actor, id: string, query: PeaksQuery): Promise<Peaks> {
    const access = requireMeasured(actor, id);
    const endSample = query.endSample ?? access.row.format.frames;
    const source = await sourceOf(access);
    return knownView(() => readPeaks({ ...source, ...query, endSample }));
  }

  function layout(actor: Actor, id: string): TileLayout {
    return tileLayout(requireMeasured(actor, id).row.format);
  }

  async function tile(access: MeasuredAccess, place: TilePlace): Promise<Uint8Array> {
    const source = await sourceOf(access);
    return knownView(() => readTile({ ...source, ...place }));
  }

  async function quiet(actor: Actor, id: string, channel: number): Promise<QuietLevels> {
    const access = requireMeasured(actor, id);
    requireChannel(access.row, channel);
    return keptQuiet(`${access.measurementId}/${channel}`, () =>
      oneAtATime(async () => readQuietLevels(await sourceOf(access), channel)),
    );
  }

  /** Blind, without active time: which frames are active is a finding of the machine. */
  async function spectrum(actor: Actor, id: string, channel: number): Promise<Spectrum> {
    const { row, measurementId, blind } = requireMeasured(actor, id);
    const whole = await knownView(() =>
      readSpectrum(viewFolders.ofMeasurement(row.id, measurementId), channel),
    );
    return blind ? { ...whole, activeDbPerHz: null } : whole;
  }

  /** Every long frame of one channel. It tells the course above 20 kHz, so there is none for whoever works blind. */
  function frames(access: MeasuredAccess, channel: number): Promise<FrameTable> {
    if (access.blind) throw notFound('This table');
    requireChannel(access.row, channel);
    return readFrameTable(viewFolders.ofMeasurement(access.row.id, access.measurementId), channel);
  }

  return { requireMeasured, peaks, layout, tile, quiet, spectrum, frames };
}

export function requireChannel({ format }: Pick<RecordingRow, 'format'>, channel: number): void {
  if (channel >= format.channels) throw notFound(`Channel ${channel}`);
}

async function knownView<Result>(read: () => Promise<Result>): Promise<Result> {
  try {
    return await read();
  } catch (error) {
    if (error instanceof NoSuchViewError) throw notFound('This view');
    throw error;
  }
}
