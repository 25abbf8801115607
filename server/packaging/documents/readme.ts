import type { ReleaseSnapshot } from '../../../shared/contract/release-snapshot.ts';
import { licences } from '../../../shared/domain/licence-mix.ts';
import { versionRule } from '../../../shared/domain/release-version.ts';
import { oneLine } from '../cells.ts';
import type { ColumnFacts, WrittenTable } from '../table.ts';
import { paragraphs } from './changelog.ts';
import { citationText } from './citation.ts';
import { loadExample, pandasExample, verifyExample } from './usage-examples.ts';

export interface ReadmeInput {
  snapshot: ReleaseSnapshot;
  tables: WrittenTable[];
  baseName: string;
}

export function readmeDocument({ snapshot, tables, baseName }: ReadmeInput): Buffer {
  const sections = [
    `# ${oneLine(snapshot.collection.title)}\n\nVersion ${snapshot.version}, ${snapshot.releaseDate}`,
    paragraphs(snapshot.collection.description),
    `In this version: ${paragraphs(snapshot.notes)}`,
    contents(snapshot),
    citation(snapshot),
    cautions,
    verifying(baseName),
    loading,
    reading,
    tableList(tables),
    otherFiles,
    versions,
    contact(snapshot),
  ];
  return Buffer.from(`${sections.join('\n\n')}\n`, 'utf8');
}

function contents(snapshot: ReleaseSnapshot): string {
  const labs = new Set(snapshot.recordings.map((recording) => recording.labName));
  const labelers = new Set(snapshot.passes.map((pass) => pass.labeler));
  const marked = new Set(snapshot.passes.map((pass) => pass.recordingId));
  const counts = [
    `Recordings: ${snapshot.recordings.length}, of runs: ${snapshot.runs.length}, from labs: ${labs.size}`,
    `Recordings marked by at least one person: ${marked.size}, in passes: ${snapshot.passes.length}, by people: ${labelers.size}`,
    `Marks of people: ${snapshot.marks.length}, settled events: ${snapshot.events.length}`,
  ];
  return `## What it holds\n\n${counts.map((line) => `- ${line}`).join('\n')}\n\n${classCounts(snapshot)}`;
}

function classCounts(snapshot: ReleaseSnapshot): string {
  const rows = snapshot.scheme.classes.map((item) => {
    const count = snapshot.events.filter((event) => event.classKey === item.key).length;
    return `| ${item.key} | ${tableText(item.title)} | ${count} |`;
  });
  return ['| class | name | settled events |', '| --- | --- | ---: |', ...rows].join('\n');
}

function citation(snapshot: ReleaseSnapshot): string {
  const { title, url } = licences[snapshot.licence];
  return [
    '## Citing and licence',
    citationText(snapshot),
    'CITATION.cff holds the same for reference managers.',
    `Licence of the whole: ${title} (${snapshot.licence}), ${url}. Each recording carries the licence its lab gave, in the column licence of metadata.csv; see LICENSE.txt.`,
  ].join('\n\n');
}

const cautions = `## Cautions

- A class is a *probable cause*: what a person judged from sound and picture, with a confidence. It is not a proof of what happened in the material.
- Figures above 20 kHz are as the sensor and the sample rate of that recording see them. Where ultrasonic_verdict is \`not-observable\`, nothing can be said about that band; an empty share is not a share of zero. A share above 20 kHz is not a statement about hearing.
- Levels in dB re full scale cannot be compared between set-ups; volts and dB(AE) are given only where full scale is known in volts.
- Recordings of one run, one specimen, or one session on one rig are not independent. Split by run at least, better by lab, never by event.
- A recording without a row in labels/passes.csv was marked by nobody: the absence of events in it means nothing.
- Many recordings are marked by one person only; settled_by says so.`;

function verifying(baseName: string): string {
  return `## Checking that nothing changed

The folder is a bag (BagIt 1.0, RFC 8493): every file has its SHA-256 and SHA-512 in the manifests. From the folder that holds the archive:

\`\`\`sh
${verifyExample(baseName)}
\`\`\`

Every line must end with OK.`;
}

const loading = `## Loading it

With Python alone, from inside the unpacked folder:

\`\`\`python
${loadExample}
\`\`\`

With pandas and soundfile, which also read float and extensible files:

\`\`\`python
${pandasExample}
\`\`\`

Loaders of audio data sets that know \`metadata.csv\` with a first column \`file_name\` can be pointed at the folder \`data\`. Tell them the sample rate, or they may resample and lose everything above their own band.`;

const reading = `## How to read the tables

- UTF-8, comma separated, one header row, lines end with LF, quoting by RFC 4180, \`.\` as decimal mark. Numbers are written in their shortest exact form; very large and very small ones have an exponent (\`2.5E-7\`).
- An empty cell means unknown or not applicable.
- Time is counted in samples, from 0. A span is half-open: start_sample is in it, end_sample is the first one after it. start_s and end_s are derived from them with nine digits; they say the same.
- sample_rate_hz is the rate of the sound itself. It differs from the rate in the header of the file where the file plays slower than life (time_expansion above 1).
- Channels are counted from 0.
- Texts written by people are guarded against spreadsheet programs that run formulas: where such a text begins with \`=\`, \`+\`, \`-\`, \`@\`, a tab, a line end or an apostrophe, one apostrophe stands before it. Take off one leading apostrophe to get the text as it was written. The columns concerned say so in datapackage.json.
- Rows are in byte order of their keys. People appear under pseudonyms that stay the same from version to version.`;

function tableList(tables: WrittenTable[]): string {
  const sections = tables.map((table) => {
    const columns = ['| column | type | meaning |', '| --- | --- | --- |', ...table.columns.map(columnLine)];
    const rows = `${table.rows.length} ${table.rows.length === 1 ? 'row' : 'rows'}`;
    return `### ${table.path} (${rows})\n\n${table.description}\n\n${columns.join('\n')}`;
  });
  return `## Tables\n\ndatapackage.json describes them for programs (Data Package 2.0, Table Schema): types, units, keys, allowed values, size and hash.\n\n${sections.join('\n\n')}`;
}

function columnLine(column: ColumnFacts): string {
  const type = column.required ? `${column.type}, always there` : column.type;
  return `| ${column.name} | ${type} | ${tableText(column.description)} |`;
}

function tableText(text: string): string {
  return oneLine(text).replaceAll('|', '\\|');
}

const otherFiles = `## Other files

- audio/: the recordings, byte for byte as the labs stored them
- CHANGELOG.md: what changed from version to version
- CITATION.cff, LICENSE.txt, datapackage.json`;

const versions = `## What the version number means

${Object.values(versionRule)
  .map((line) => `- ${line}`)
  .join('\n')}

A published version never changes. What is corrected comes as a new version.`;

function contact(snapshot: ReleaseSnapshot): string {
  const publisher = oneLine(snapshot.publisher);
  return `## Contact\n\n${publisher}, ${snapshot.contactEmail}\n\nWritten by generator version ${oneLine(snapshot.generatorVersion)}.`;
}
