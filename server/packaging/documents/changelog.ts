import type { ReleaseSnapshot } from '../../../shared/contract/release-snapshot.ts';
import { oneLine } from '../cells.ts';

/** Newest first. */
export function changelogDocument(snapshot: ReleaseSnapshot): Buffer {
  const entries = snapshot.changelog
    .toReversed()
    .map((entry) => `## ${entry.version} (${entry.releaseDate})\n\n${paragraphs(entry.notes)}\n`);
  return Buffer.from(`# Changes of ${oneLine(snapshot.collection.title)}\n\n${entries.join('\n')}`, 'utf8');
}

/** Text of people inside a Markdown document: a line that would become a heading is kept a line. */
export function paragraphs(text: string): string {
  const lines = text.replace(/\r\n?/g, '\n').trim().split('\n');
  return lines.map((line) => line.trimEnd().replace(/^(\s{0,3})(#|```|~~~|>|<)/, '$1\\$2')).join('\n');
}
