import type { ReleaseSnapshot } from '../../shared/contract/release-snapshot.ts';
import type { ReleaseContents } from '../../shared/domain/release-version.ts';
import { writeTable, type WrittenTable } from './table.ts';
import { audioPath } from './tables/audio-path.ts';
import { featuresTable } from './tables/features-table.ts';
import { eventsTable, marksTable } from './tables/marks-tables.ts';
import { recordingsTable } from './tables/recordings-table.ts';
import { runsTable } from './tables/runs-table.ts';
import { classesTable, passesTable } from './tables/scheme-tables.ts';

/** Every table of the archive, written. */
export function releaseTables(snapshot: ReleaseSnapshot): WrittenTable[] {
  return [
    writeTable(recordingsTable(snapshot)),
    writeTable(runsTable(snapshot)),
    writeTable(eventsTable(snapshot)),
    writeTable(marksTable(snapshot)),
    writeTable(classesTable(snapshot)),
    writeTable(passesTable(snapshot)),
    writeTable(featuresTable(snapshot)),
  ];
}

/** What the version rule compares between two releases. */
export function releaseContents(snapshot: ReleaseSnapshot): ReleaseContents {
  return {
    tables: releaseTables(snapshot).map(({ name, columns, primaryKey, rows }) => ({
      name,
      columns: columns.map((column) => ({ name: column.name, type: column.type })),
      keyColumns: primaryKey,
      rows,
    })),
    files: snapshot.recordings.map((recording) => ({ path: audioPath(recording), sha256: recording.sha256 })),
  };
}
