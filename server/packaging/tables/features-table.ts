import { burstParametersSchema, type BurstParameters } from '../../../shared/contract/measurement.ts';
import type { ReleaseSnapshot, SnapshotEvent } from '../../../shared/contract/release-snapshot.ts';
import type { Column, TableDefinition } from '../table.ts';
import { audioPath, indexRecordings, recordingOf } from './audio-path.ts';

interface FeatureRow {
  event: SnapshotEvent;
  fileName: string;
  burst: BurstParameters;
}

interface Figure {
  name: string;
  type: 'integer' | 'number';
  required?: boolean;
  minimum?: number;
  description: string;
  of: (burst: BurstParameters) => number | null;
}

const places: Figure[] = [
  {
    name: 'onset_sample',
    type: 'integer',
    required: true,
    minimum: 0,
    description: 'Sample at which the burst begins.',
    of: (burst) => burst.onsetSample,
  },
  {
    name: 'burst_end_sample',
    type: 'integer',
    required: true,
    minimum: 0,
    description: 'First sample after the burst.',
    of: (burst) => burst.endSample,
  },
  {
    name: 'peak_sample',
    type: 'integer',
    required: true,
    minimum: 0,
    description: 'Sample of the peak amplitude.',
    of: (burst) => burst.peakSample,
  },
  {
    name: 'onset_uncertainty_us',
    type: 'number',
    minimum: 0,
    description: 'Uncertainty of the onset in microseconds.',
    of: (burst) => burst.onsetUncertaintyUs,
  },
];

const parameters: Figure[] = [
  {
    name: 'peak_dbfs',
    type: 'number',
    description: 'Peak amplitude in dB re full scale.',
    of: (burst) => burst.peakDb,
  },
  {
    name: 'peak_dbae',
    type: 'number',
    description:
      'Peak amplitude in dB(AE), re 1 microvolt at the sensor; only where full scale is known in volts.',
    of: (burst) => burst.peakDbAe,
  },
  {
    name: 'rise_time_us',
    type: 'number',
    required: true,
    minimum: 0,
    description: 'Rise time in microseconds.',
    of: (burst) => burst.riseTimeUs,
  },
  {
    name: 'duration_us',
    type: 'number',
    required: true,
    minimum: 0,
    description: 'Duration in microseconds.',
    of: (burst) => burst.durationUs,
  },
  {
    name: 'counts',
    type: 'integer',
    required: true,
    minimum: 0,
    description: 'Positive-going crossings of the threshold.',
    of: (burst) => burst.counts,
  },
  {
    name: 'energy_fs2_s',
    type: 'number',
    required: true,
    minimum: 0,
    description: 'Integral of the squared signal, in full scale squared times seconds.',
    of: (burst) => burst.energyFs2S,
  },
  {
    name: 'energy_v2_s',
    type: 'number',
    minimum: 0,
    description: 'The same in volts squared times seconds; only where full scale is known in volts.',
    of: (burst) => burst.energyV2S,
  },
  {
    name: 'rms_dbfs',
    type: 'number',
    description: 'Root mean square over the burst in dB re full scale; a full-scale sine has 0 dB.',
    of: (burst) => burst.rmsDb,
  },
  {
    name: 'average_frequency_hz',
    type: 'number',
    minimum: 0,
    description: 'Counts divided by duration, in Hz.',
    of: (burst) => burst.averageFrequencyHz,
  },
  {
    name: 'ra_ms_per_v',
    type: 'number',
    minimum: 0,
    description: 'RA value: rise time divided by peak amplitude, in milliseconds per volt.',
    of: (burst) => burst.raMsPerV,
  },
];

const spectral: Figure[] = [
  {
    name: 'peak_frequency_hz',
    type: 'number',
    minimum: 0,
    description: 'Frequency of the strongest component in Hz.',
    of: (burst) => burst.peakFrequencyHz,
  },
  {
    name: 'centroid_hz',
    type: 'number',
    minimum: 0,
    description: 'Spectral centroid in Hz.',
    of: (burst) => burst.centroidHz,
  },
  {
    name: 'ultrasonic_share',
    type: 'number',
    description:
      'Share of the energy above 20 kHz, noise subtracted, as this sensor and rate see it; empty where nothing above 20 kHz can be seen.',
    of: (burst) => burst.ultrasonicShare,
  },
  {
    name: 'snr_db',
    type: 'number',
    description: 'Peak over the noise before the burst, in dB.',
    of: (burst) => burst.snrDb,
  },
];

const fromFigure = ({ of, ...facts }: Figure): Column<FeatureRow> => ({
  ...facts,
  value: (row) => of(row.burst),
});

const columns: Column<FeatureRow>[] = [
  {
    name: 'event_id',
    type: 'string',
    required: true,
    unique: true,
    description: 'The settled event, in labels/events.csv.',
    value: (row) => row.event.id,
  },
  {
    name: 'file_name',
    type: 'string',
    required: true,
    description: 'Path of the audio file, as in metadata.csv.',
    value: (row) => row.fileName,
  },
  ...[...places, ...parameters, ...spectral].map(fromFigure),
  {
    name: 'hearing_class',
    type: 'string',
    required: true,
    enum: burstParametersSchema.shape.hearingClass.options,
    description:
      'Where the energy lies against 20 kHz: below (less than 10 % above it), across, above (more than 90 %), or unknown. Not a statement that it could be heard.',
    value: (row) => row.burst.hearingClass,
  },
  {
    name: 'clipped',
    type: 'boolean',
    required: true,
    description: 'True where samples of the burst reach full scale: amplitude and energy are then too small.',
    value: (row) => row.burst.clipped,
  },
];

/** Burst parameters of the settled events; an event without measured parameters has no row. */
export function featuresTable(snapshot: ReleaseSnapshot): TableDefinition<FeatureRow> {
  const recordings = indexRecordings(snapshot);
  return {
    name: 'features',
    path: 'features/events.csv',
    title: 'Burst parameters',
    description:
      'Burst parameters of the settled events, in the vocabulary of ASTM E1316 and ISO 12716, measured on the untouched samples.',
    primaryKey: ['event_id'],
    foreignKeys: [
      { field: 'event_id', table: 'events', targetField: 'event_id' },
      { field: 'file_name', table: 'recordings', targetField: 'file_name' },
    ],
    columns,
    rows: snapshot.events.flatMap((event) => {
      if (!event.parameters) return [];
      return [
        { event, fileName: audioPath(recordingOf(recordings, event.recordingId)), burst: event.parameters },
      ];
    }),
    orderBy: (row) => [row.fileName, row.event.startSample, row.event.id],
  };
}
