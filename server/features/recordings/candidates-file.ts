import { candidateSchema, type Candidate } from '../../../shared/contract/candidates.ts';
import { csvPieces, type CsvCell } from './csv-pieces.ts';

/** In the order of the file; names and units are those of the interface. */
const columns = [
  'ordinal',
  'id',
  'channel',
  'channels',
  'onsetSample',
  'endSample',
  'peakSample',
  'onsetS',
  'onsetUncertaintyUs',
  'hearingClass',
  'snrDb',
  'peakDb',
  'peakDbAe',
  'rmsDb',
  'clipped',
  'riseTimeUs',
  'durationUs',
  'counts',
  'rises',
  'energyFs2S',
  'energyV2S',
  'averageFrequencyHz',
  'raMsPerV',
  'peakFrequencyHz',
  'centroidHz',
  'ultrasonicShare',
  'bandLowHz',
  'bandHighHz',
] as const satisfies (keyof Candidate)[];

function toCell(value: Candidate[keyof Candidate]): CsvCell {
  return Array.isArray(value) ? value.join(' ') : value;
}

/** As the contract has them: a field that it does not name cannot leave, one that older lists lack is filled in. */
async function* rowsOf(found: AsyncIterable<Candidate>): AsyncGenerator<CsvCell[]> {
  for await (const one of found) {
    const candidate = candidateSchema.parse(one);
    yield columns.map((column) => toCell(candidate[column]));
  }
}

/** Several channels of one candidate stand in one cell, with spaces between them. */
export function candidatesCsv(found: AsyncIterable<Candidate>): AsyncGenerator<string> {
  return csvPieces(columns, rowsOf(found));
}

const linesPerPiece = 500;

/** One JSON object in each line, as lists have them. */
export async function* candidatesJsonLines(found: AsyncIterable<Candidate>): AsyncGenerator<string> {
  let lines: string[] = [];
  for await (const candidate of found) {
    lines.push(`${JSON.stringify(candidateSchema.parse(candidate))}\n`);
    if (lines.length < linesPerPiece) continue;
    yield lines.join('');
    lines = [];
  }
  yield lines.join('');
}
