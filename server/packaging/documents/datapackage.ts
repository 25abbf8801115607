import { FILE_KINDS } from '../../../shared/audio/file-kind.ts';
import type { ReleaseSnapshot, SnapshotRecording } from '../../../shared/contract/release-snapshot.ts';
import { licences, type LicenceId } from '../../../shared/domain/licence-mix.ts';
import { compareBytes } from '../byte-order.ts';
import { oneLine } from '../cells.ts';
import { sha256Of } from '../digests.ts';
import type { ColumnFacts, WrittenTable } from '../table.ts';
import { audioPath } from '../tables/audio-path.ts';
import { orcidUrl } from './citation.ts';

const profile = (name: string) => `https://datapackage.org/profiles/2.0/${name}.json`;

/** With more recordings the descriptor names the tables only; metadata.csv and the manifests list the audio anyway. */
const mostAudioResources = 1000;

/** Data Package 2.0: every table with its Table Schema, size and hash. */
export function dataPackageDocument(snapshot: ReleaseSnapshot, tables: WrittenTable[]): Buffer {
  const audio =
    snapshot.recordings.length > mostAudioResources
      ? []
      : snapshot.recordings.toSorted((a, b) => compareBytes(a.id, b.id)).map(audioResource);
  const descriptor = {
    $schema: profile('datapackage'),
    name: snapshot.collection.slug,
    ...(snapshot.doi ? { id: `https://doi.org/${snapshot.doi}` } : {}),
    title: oneLine(snapshot.collection.title),
    description: snapshot.collection.description,
    version: snapshot.version,
    created: `${snapshot.releaseDate}T00:00:00Z`,
    licenses: [licenceOf(snapshot.licence)],
    contributors: contributors(snapshot),
    keywords: ['acoustic emission', 'solidification', 'freezing', 'ultrasound'],
    resources: [...tables.map(tableResource), ...audio],
  };
  return Buffer.from(`${JSON.stringify(descriptor, null, 2)}\n`, 'utf8');
}

function licenceOf(id: LicenceId) {
  return { name: id, path: licences[id].url, title: licences[id].title };
}

function contributors(snapshot: ReleaseSnapshot) {
  const people = snapshot.creators.map((creator) => ({
    title: oneLine(creator.name),
    ...(creator.orcid ? { path: orcidUrl(creator.orcid) } : {}),
    roles: ['creator', oneLine(creator.role)].filter((role) => role !== ''),
  }));
  const publisher = {
    title: oneLine(snapshot.publisher),
    email: snapshot.contactEmail,
    roles: ['publisher', 'contact'],
  };
  return [...people, publisher];
}

function tableResource(table: WrittenTable) {
  return {
    name: table.name,
    type: 'table',
    path: table.path,
    title: table.title,
    description: table.description,
    format: 'csv',
    mediatype: 'text/csv',
    encoding: 'utf-8',
    bytes: table.csv.length,
    hash: `sha256:${sha256Of(table.csv)}`,
    dialect: {
      $schema: profile('tabledialect'),
      delimiter: ',',
      lineTerminator: '\n',
      quoteChar: '"',
      doubleQuote: true,
      header: true,
    },
    schema: tableSchema(table),
  };
}

function tableSchema(table: WrittenTable) {
  return {
    $schema: profile('tableschema'),
    fields: table.columns.map(field),
    missingValues: [''],
    primaryKey: table.primaryKey,
    ...(table.foreignKeys.length === 0 ? {} : { foreignKeys: table.foreignKeys.map(foreignKey) }),
  };
}

function foreignKey(key: WrittenTable['foreignKeys'][number]) {
  return { fields: [key.field], reference: { resource: key.table, fields: [key.targetField] } };
}

const guardNote = 'Free text: an apostrophe at its very beginning is a guard and not part of it.';

function field(column: ColumnFacts) {
  const { required, unique, pattern, minimum, maximum } = column;
  const constraints = Object.fromEntries(
    Object.entries({ required, unique, pattern, enum: column.enum, minimum, maximum }).filter(
      ([, value]) => value !== undefined,
    ),
  );
  return {
    name: column.name,
    type: column.type,
    description: column.isFreeText ? `${column.description} ${guardNote}` : column.description,
    ...(Object.keys(constraints).length === 0 ? {} : { constraints }),
  };
}

function audioResource(recording: SnapshotRecording) {
  const { extension, mediaType } = FILE_KINDS[recording.format.container];
  return {
    name: `audio-${recording.id.toLowerCase()}`,
    path: audioPath(recording),
    format: extension,
    mediatype: mediaType,
    bytes: recording.sizeBytes,
    hash: `sha256:${recording.sha256}`,
    licenses: [licenceOf(recording.licence)],
  };
}
