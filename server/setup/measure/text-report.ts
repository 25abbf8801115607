import { createReadStream } from 'node:fs';
import { createInterface } from 'node:readline';
import { durationText, frequencyText, levelText } from '../../../shared/audio/unit-text.ts';
import type {
  DetectedCandidate,
  MeasurementSummary,
  QualityFinding,
} from '../../../shared/contract/measurement.ts';
import type { MeasureResult } from '../../measuring/join-segments.ts';

const STRONGEST = 10;
const LABEL_WIDTH = 14;
const LINE_WIDTH = 100;

/** What a person wants to know of a recording, as lines of text. */
export async function textReport(name: string, result: MeasureResult): Promise<string> {
  const { summary } = result;
  return [
    name,
    ...labelled('Format', [formatText(summary)]),
    ...labelled(
      'Levels',
      summary.levels.map((_, channel) => levelsText(summary, channel)),
    ),
    ...labelled('Quality', qualityTexts(summary)),
    ...labelled('Bandwidth', bandwidthTexts(summary)),
    ...labelled('Above 20 kHz', [`${verdictText(summary)}. ${summary.ultrasonic.reason}`]),
    ...labelled('Candidates', [candidatesText(summary)]),
    ...(await strongestLines(result)),
    '',
  ].join('\n');
}

function formatText({ format }: MeasurementSummary): string {
  const { container, encoding, bitsPerSample, channels, sampleRateHz, frames } = format;
  const length = durationText(frames / sampleRateHz);
  const count = `${channels} ${channels === 1 ? 'channel' : 'channels'}`;
  return `${container}, ${bitsPerSample}-bit ${encoding}, ${count}, ${frequencyText(sampleRateHz)}, ${length}`;
}

function levelsText({ levels, descriptors }: MeasurementSummary, channel: number): string {
  const { rmsDb, peakDb, crestDb } = levels[channel]!;
  const centroidHz = descriptors[channel]?.centroidHz ?? null;
  const centroid = centroidHz === null ? '' : `, centroid ${frequencyText(Math.round(centroidHz))}`;
  return `channel ${channel}: rms ${levelText(rmsDb, 'dB')}, peak ${levelText(peakDb, 'dB')} re full scale, crest ${levelText(crestDb, 'dB')}${centroid}`;
}

/** Findings about the edge of the floor; they say what the line about the bandwidth would say. */
const BAND_CODES: ReadonlySet<QualityFinding['code']> = new Set(['band-limited', 'lossy-or-converted']);

function findingText({ weight, sentence }: QualityFinding): string {
  return weight === 'note' ? sentence : `${weight}: ${sentence}`;
}

function qualityTexts({ quality }: MeasurementSummary): string[] {
  const others = quality.filter(({ code }) => !BAND_CODES.has(code));
  if (others.length > 0) return others.map(findingText);
  return [quality.length === 0 ? 'Nothing stands out.' : 'Nothing else stands out.'];
}

function bandwidthTexts({ quality, bandwidth }: MeasurementSummary): string[] {
  const found = quality.filter(({ code }) => BAND_CODES.has(code));
  return found.length > 0 ? found.map(findingText) : [bandwidth.reason];
}

function verdictText({ ultrasonic }: MeasurementSummary): string {
  return { found: 'Found', 'not-found': 'Not found', 'not-observable': 'Not observable' }[ultrasonic.verdict];
}

function candidatesText({ ultrasonic }: MeasurementSummary): string {
  const { total, below, across, above, expectedByChance } = ultrasonic.candidates;
  const unknown = total - below - across - above;
  const chance = expectedByChance < 0.01 ? 'fewer than 0.01' : `at most ${expectedByChance.toFixed(2)}`;
  const untold = unknown > 0 ? `, ${unknown} not known` : '';
  const classes = `${below} below the hearing line, ${across} across, ${above} above${untold}`;
  return `${total} (${classes}); steady noise alone would give ${chance}.`;
}

async function strongestLines({ summary, candidatesPath }: MeasureResult): Promise<string[]> {
  const strongest = await strongestOf(candidatesPath);
  if (strongest.length === 0) return [];
  const { sampleRateHz } = summary.format;
  const rows = strongest.map((candidate) => [
    (candidate.onsetSample / sampleRateHz).toFixed(6),
    String(candidate.channel),
    candidate.peakFrequencyHz === null
      ? '–'
      : frequencyText(Math.round(candidate.peakFrequencyHz / 100) * 100),
    levelText(candidate.snrDb, 'dB'),
    durationText(candidate.durationUs / 1e6),
    candidate.hearingClass,
  ]);
  const title = ['onset s', 'channel', 'frequency', 'SNR', 'duration', 'hearing line'];
  const widths = title.map((text, column) =>
    Math.max(text.length, ...rows.map((row) => row[column]!.length)),
  );
  const lines = [title, ...rows].map((row) => row.map((cell, c) => cell.padStart(widths[c]!)).join('  '));
  return labelled('Strongest', lines);
}

async function strongestOf(candidatesPath: string): Promise<DetectedCandidate[]> {
  let strongest: DetectedCandidate[] = [];
  for await (const line of createInterface({ input: createReadStream(candidatesPath) })) {
    strongest.push(JSON.parse(line) as DetectedCandidate);
    if (strongest.length > 10 * STRONGEST) strongest = keepStrongest(strongest);
  }
  return keepStrongest(strongest);
}

function keepStrongest(candidates: DetectedCandidate[]): DetectedCandidate[] {
  return candidates.sort((a, b) => (b.snrDb ?? -Infinity) - (a.snrDb ?? -Infinity)).slice(0, STRONGEST);
}

/** The label before the first line, the others indented under it, long ones wrapped. */
function labelled(label: string, texts: string[]): string[] {
  const lines = texts.flatMap((text) => wrapped(text, LINE_WIDTH - LABEL_WIDTH));
  return lines.map((line, index) => `  ${(index === 0 ? label : '').padEnd(LABEL_WIDTH)}${line}`);
}

function wrapped(text: string, width: number): string[] {
  if (text.length <= width) return [text];
  const lines: string[] = [];
  let line = '';
  for (const word of text.split(' ')) {
    if (line !== '' && line.length + 1 + word.length > width) {
      lines.push(line);
      line = word;
    } else line = line === '' ? word : `${line} ${word}`;
  }
  return [...lines, line];
}
