import type { ReleaseSnapshot, SnapshotRun } from '../../../shared/contract/release-snapshot.ts';
import { processSchema, runKindSchema } from '../../../shared/contract/runs.ts';
import type { Column, TableDefinition } from '../table.ts';

const told = (
  name: string,
  description: string,
  value: Column<SnapshotRun>['value'],
): Column<SnapshotRun> => ({
  name,
  type: 'string',
  isFreeText: true,
  description,
  value,
});

const columns: Column<SnapshotRun>[] = [
  {
    name: 'run_id',
    type: 'string',
    required: true,
    unique: true,
    description: 'Identifier of the run; the same in every release.',
    value: (row) => row.id,
  },
  { ...told('lab', 'The lab that made the run.', (row) => row.labName), required: true },
  told('title', 'Name the lab gives the run.', (row) => row.title),
  {
    name: 'kind',
    type: 'string',
    required: true,
    enum: runKindSchema.options,
    description: 'An experiment, a control without sample, or a check of the sensor.',
    value: (row) => row.kind,
  },
  told('material', 'What solidified.', (row) => row.material),
  told('composition', 'Composition and purity.', (row) => row.composition),
  {
    name: 'process',
    type: 'string',
    required: true,
    enum: processSchema.options,
    description: 'How it solidified.',
    value: (row) => row.process,
  },
  told('container', 'Container or substrate.', (row) => row.container),
  told('cooling', 'How it was cooled.', (row) => row.cooling),
  {
    name: 'cooling_rate_k_per_s',
    type: 'number',
    minimum: 0,
    description: 'Cooling rate in kelvin per second.',
    value: (row) => row.coolingRateKPerS,
  },
  {
    name: 'pressure_pa',
    type: 'number',
    minimum: 0,
    description: 'Pressure in pascals.',
    value: (row) => row.pressurePa,
  },
  {
    name: 'start_temperature_c',
    type: 'number',
    minimum: -273.15,
    description: 'Temperature at the start in degrees Celsius.',
    value: (row) => row.startTemperatureC,
  },
  {
    name: 'supercooling_k',
    type: 'number',
    minimum: 0,
    description: 'Supercooling at nucleation in kelvin.',
    value: (row) => row.supercoolingK,
  },
  {
    name: 'started_at',
    type: 'datetime',
    description: 'Start of the run, in UTC.',
    value: (row) => row.startedAt,
  },
  told('specimen', 'Name of the specimen; runs that share one are not independent.', (row) => row.specimen),
  told('notes', 'What the lab noted.', (row) => row.notes),
];

export function runsTable(snapshot: ReleaseSnapshot): TableDefinition<SnapshotRun> {
  return {
    name: 'runs',
    path: 'runs.csv',
    title: 'Runs',
    description: 'One row per run: one solidification experiment with its conditions, as the lab told them.',
    primaryKey: ['run_id'],
    foreignKeys: [],
    columns,
    rows: snapshot.runs,
    orderBy: (row) => [row.id],
  };
}
