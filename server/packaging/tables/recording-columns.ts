import { ultrasoundSchema } from '../../../shared/contract/measurement.ts';
import type { SnapshotRecording } from '../../../shared/contract/release-snapshot.ts';
import { automaticGainSchema, sensorKindSchema } from '../../../shared/contract/sensors.ts';
import type { Column } from '../table.ts';

type RecordingColumn = Column<SnapshotRecording>;

const hertz = (name: string, description: string, value: RecordingColumn['value']): RecordingColumn => ({
  name,
  type: 'number',
  minimum: 0,
  description: `${description} in Hz.`,
  value,
});
const told = (name: string, description: string, value: RecordingColumn['value']): RecordingColumn => ({
  name,
  type: 'string',
  isFreeText: true,
  description,
  value,
});

export const listeningColumns: RecordingColumn[] = [
  told('sensor', 'Name the lab gives the sensor.', (row) => row.sensor.name),
  {
    name: 'sensor_kind',
    type: 'string',
    required: true,
    enum: sensorKindSchema.options,
    description: 'What listened.',
    value: (row) => row.sensor.kind,
  },
  told('sensor_model', "Maker's model of the sensor.", (row) => row.sensor.model),
  hertz('sensor_low_hz', 'Lower edge of the usable band of the sensor', (row) => row.sensor.lowHz),
  hertz('sensor_high_hz', 'Upper edge of the usable band of the sensor', (row) => row.sensor.highHz),
  told('sensor_sensitivity', 'Sensitivity of the sensor, with its unit.', (row) => row.sensor.sensitivity),
  told('setup', 'Name of the set-up: the sensor as it was used.', (row) => row.setup.name),
  told('coupling', 'How the sensor was coupled.', (row) => row.setup.coupling),
  told('mounting', 'How the sensor was mounted.', (row) => row.setup.mounting),
  {
    name: 'distance_m',
    type: 'number',
    minimum: 0,
    description: 'Distance from sensor to sample in metres.',
    value: (row) => row.setup.distanceM,
  },
  {
    name: 'preamp_gain_db',
    type: 'number',
    description: 'Gain of the preamplifier in dB.',
    value: (row) => row.setup.preampGainDb,
  },
  hertz('filter_low_hz', 'Lower edge of the filter before recording', (row) => row.setup.filterLowHz),
  hertz('filter_high_hz', 'Upper edge of the filter before recording', (row) => row.setup.filterHighHz),
  {
    name: 'automatic_gain',
    type: 'string',
    required: true,
    enum: automaticGainSchema.options,
    description: 'Whether the recorder changed its gain by itself; where it did, levels cannot be compared.',
    value: (row) => row.setup.automaticGain,
  },
  {
    name: 'full_scale_v',
    type: 'number',
    minimum: 0,
    description: "Volts at the recorder's input that a sample of full scale stands for.",
    value: (row) => row.setup.fullScaleV,
  },
];

export const measuredColumns: RecordingColumn[] = [
  {
    ...hertz(
      'effective_bandwidth_hz',
      'Frequency above which nothing survives in this file,',
      (row) => row.measured.effectiveBandwidthHz,
    ),
    required: true,
  },
  {
    name: 'bandwidth_edge',
    type: 'string',
    required: true,
    enum: ['none', 'brick-wall'],
    description: 'Whether the noise floor itself collapses at effective_bandwidth_hz.',
    value: (row) => row.measured.bandwidthEdge,
  },
  {
    name: 'ultrasonic_verdict',
    type: 'string',
    required: true,
    enum: ultrasoundSchema.shape.verdict.options,
    description:
      'Sound above 20 kHz, as this sensor and rate see it: found, looked for and not found, or not observable.',
    value: (row) => row.measured.ultrasonicVerdict,
  },
  told('ultrasonic_reason', 'The reason for the verdict, in words.', (row) => row.measured.ultrasonicReason),
  hertz(
    'ultrasonic_band_low_hz',
    'Lower edge of the band that was looked at',
    (row) => row.measured.ultrasonicBandLowHz,
  ),
  hertz(
    'ultrasonic_band_high_hz',
    'Upper edge of the band that was looked at',
    (row) => row.measured.ultrasonicBandHighHz,
  ),
  {
    name: 'ultrasonic_energy_share',
    type: 'number',
    description:
      'Share of the energy in the band that sensor and rate can see that lies above 20 kHz, over the whole recording, from 0 to 1.',
    value: (row) => row.measured.ultrasonicEnergyShare,
  },
  {
    name: 'rms_dbfs',
    type: 'number',
    description: 'Root mean square of the strongest channel in dB re full scale; a full-scale sine has 0 dB.',
    value: (row) => row.measured.rmsDb,
  },
  {
    name: 'peak_dbfs',
    type: 'number',
    description: 'Largest sample of the strongest channel in dB re full scale.',
    value: (row) => row.measured.peakDb,
  },
  {
    name: 'clipped_samples',
    type: 'integer',
    required: true,
    minimum: 0,
    description: 'Number of samples at full scale, over all channels.',
    value: (row) => row.measured.clippedSamples,
  },
  {
    name: 'measurement_version',
    type: 'string',
    required: true,
    isFreeText: true,
    description: 'Version of the method that measured the recording.',
    value: (row) => row.measured.measurementVersion,
  },
  {
    name: 'detector_version',
    type: 'string',
    required: true,
    isFreeText: true,
    description: 'Version of the detector that proposed candidates.',
    value: (row) => row.measured.detectorVersion,
  },
  told('note', 'What the lab noted.', (row) => row.note),
];
