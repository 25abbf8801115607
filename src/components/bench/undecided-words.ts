import type { EventClass } from '@shared/contract/schemes.ts';
import { fieldsOf } from '@/composables/bench/mark.ts';
import type { MarkFields } from '@/composables/bench/mark.ts';
import { classTitle, markSentence, timeWords } from '@/composables/bench/mark-words.ts';
import { mergeWithTheirs } from '@/composables/outbox/outbox-entry.ts';
import type { OutboxEntry } from '@/composables/outbox/outbox-entry.ts';
import { formatDuration, formatFrequency } from '@/composables/useFormat.ts';

/** What somebody has to know to decide on one mark. */
export interface UndecidedWords {
  title: string;
  lines: string[];
  /** Where two changes meet in the same fields: what stands here and there. */
  fields: { name: string; mine: string; theirs: string }[];
  mineLabel: string;
  theirsLabel: string;
}

export function undecidedWords(entry: OutboxEntry, classes: readonly EventClass[]): UndecidedWords {
  if (entry.state === 'refused') return refusedWords(entry, classes);
  if (!entry.theirs) return goneWords(entry, classes);
  if (!entry.wish) return deletedHereWords(entry, classes);
  const clashes = mergeWithTheirs(entry, 'mine')?.clashes ?? [];
  const speech = { classes, sampleRateHz: entry.place.sampleRateHz };
  const [mine, theirs] = [entry.wish, fieldsOf(entry.theirs)];
  return {
    title: 'A mark was changed elsewhere in the meantime.',
    lines: [`${markSentence(mine, speech)}. Where only one side changed something, both changes are kept.`],
    fields: clashes.map((name) => ({
      name: FIELD_NAMES[name] ?? name,
      mine: fieldWords(name, mine, speech),
      theirs: fieldWords(name, theirs, speech),
    })),
    mineLabel: 'Keep mine',
    theirsLabel: 'Take the other',
  };
}

function refusedWords(entry: OutboxEntry, classes: readonly EventClass[]): UndecidedWords {
  return {
    title: 'The server did not take a mark.',
    lines: [entry.sentence, `Yours: ${describe(entry, entry.wish, classes)}`],
    fields: [],
    mineLabel: 'Try again',
    theirsLabel: 'Give this change up',
  };
}

function goneWords(entry: OutboxEntry, classes: readonly EventClass[]): UndecidedWords {
  return {
    title: 'A mark that you changed here was deleted elsewhere.',
    lines: [`Yours: ${describe(entry, entry.wish, classes)}`],
    fields: [],
    mineLabel: 'Set it again',
    theirsLabel: 'Leave it deleted',
  };
}

function deletedHereWords(entry: OutboxEntry, classes: readonly EventClass[]): UndecidedWords {
  return {
    title: 'A mark that you deleted here was changed elsewhere.',
    lines: [`There: ${describe(entry, entry.theirs, classes)}`],
    fields: [],
    mineLabel: 'Delete it',
    theirsLabel: 'Keep the other',
  };
}

function describe(entry: OutboxEntry, mark: MarkFields | null, classes: readonly EventClass[]): string {
  const { sampleRateHz } = entry.place;
  const before = entry.base?.mark ?? entry.sent.find((form) => form !== null);
  if (!mark) return before ? `deleted, ${markSentence(before, { classes, sampleRateHz })}` : 'deleted';
  const length = formatDuration((mark.endSample - mark.startSample) / sampleRateHz);
  const note = mark.note ? `, "${mark.note}"` : '';
  return `${markSentence(mark, { classes, sampleRateHz })}, lasting ${length}${note}`;
}

const FIELD_NAMES: Readonly<Record<string, string>> = {
  channel: 'Channel',
  startSample: 'Start',
  endSample: 'End',
  lowHz: 'Band from',
  highHz: 'Band to',
  classKey: 'Class',
  confidence: 'Confidence',
  note: 'Note',
};

type Speech = Parameters<typeof markSentence>[1];

function fieldWords(name: string, mark: MarkFields, { classes, sampleRateHz }: Speech): string {
  const value: unknown = Object.entries(mark).find(([key]) => key === name)?.[1];
  if (value === null || value === '') return 'none';
  if (name === 'classKey') return classTitle(mark.classKey, classes);
  if (typeof value !== 'number') return typeof value === 'string' ? value : JSON.stringify(value);
  if (name.endsWith('Sample')) return timeWords(value, sampleRateHz);
  if (name.endsWith('Hz')) return formatFrequency(value);
  return String(value);
}
