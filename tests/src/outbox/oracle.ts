import type { MarkFields } from '@/composables/bench/mark.ts';
import type { OutboxEntry } from '@/composables/outbox/outbox-entry.ts';
import { changedFields } from '@/composables/outbox/merge-fields.ts';
import type { FakeServer } from './fake-server.ts';

/** What became of one mark, which keeps its start whatever id it has. */
interface Story {
  passId: string;
  personId: string;
  /** As somebody wants it who was told that it is kept; `null` where it is deleted. */
  wanted: MarkFields | null;
  /** Notes that somebody saw before changing them. */
  seenNotes: Set<string>;
  /** Changed on another machine in a way that has no one right end, or given up by somebody. */
  isOpen: boolean;
  wasTouchedElsewhere: boolean;
  confidenceElsewhere: MarkFields['confidence'] | null;
  wasDeletedOnce: boolean;
  wasDecided: boolean;
}

/** Follows what people were told, and says where server and outbox do not bear it out. */
export function createOracle(server: FakeServer) {
  const stories = new Map<number, Story>();

  function storyOf(mark: MarkFields, place: { passId: string; personId: string }): Story {
    const known = stories.get(mark.startSample);
    if (known) return known;
    const facts = { isOpen: false, wasTouchedElsewhere: false, wasDeletedOnce: false, wasDecided: false };
    const story = {
      ...place,
      ...facts,
      wanted: null,
      seenNotes: new Set<string>(),
      confidenceElsewhere: null,
    };
    stories.set(mark.startSample, story);
    return story;
  }

  /** Called in the order in which changes are kept. */
  function kept(
    from: MarkFields | null,
    to: MarkFields | null,
    place: { passId: string; personId: string },
  ): void {
    const mark = to ?? from;
    if (!mark) return;
    const story = storyOf(mark, place);
    if (from) story.seenNotes.add(from.note.trim());
    if (!to) story.wasDeletedOnce = true;
    const isWhole = !to || !from || !story.wanted;
    story.wanted = isWhole ? to : { ...story.wanted!, ...changedFields({ ...from }, { ...to }) };
  }

  const rowsOf = (start: number) => server.live().filter(({ event }) => event.startSample === start);
  const notesOf = (start: number, by?: 'tab' | 'elsewhere') =>
    server.writes.filter(({ mark, by: who }) => mark?.startSample === start && (!by || who === by));

  function isBorneOut(start: number, { wanted }: Story): boolean {
    const rows = rowsOf(start);
    if (!wanted) return rows.length === 0;
    const event = rows[0]?.event;
    return rows.length === 1 && event?.note === wanted.note.trim() && event.classKey === wanted.classKey;
  }

  /** At any moment: what is not stored is in the outbox, where the counts of the page come from. */
  function findHidden(entries: readonly OutboxEntry[]): string[] {
    const starts = new Set(entries.map(startOf));
    return [...stories]
      .filter(([start, story]) => !story.isOpen && !isBorneOut(start, story) && !starts.has(start))
      .map(([start, story]) => `mark ${start} is neither stored as wanted (${say(story.wanted)}) nor kept`);
  }

  /** At the end, when everything has been sent that can be. */
  function findFaults(entries: readonly OutboxEntry[]): string[] {
    const starts = new Set(entries.map(startOf));
    return [...stories].flatMap(([start, story]) => [
      ...(starts.has(start) || story.isOpen || isBorneOut(start, story)
        ? []
        : [
            `mark ${start} should be ${say(story.wanted)} and is ${
              rowsOf(start)
                .map(({ event }) => say(event))
                .join(' and ') || 'not there'
            }`,
          ]),
      ...(rowsOf(start).length > 1 && !story.wasDecided ? [`mark ${start} is there twice`] : []),
      ...lostSilently(start, story, starts.has(start)),
      ...overwritten(start, story),
      ...rowsOf(start)
        .filter(({ ownerId, event }) => ownerId !== story.personId || event.passId !== story.passId)
        .map(() => `mark ${start} was stored under another person`),
    ]);
  }

  function lostSilently(start: number, story: Story, isKept: boolean): string[] {
    const { wanted, confidenceElsewhere } = story;
    if (story.wasDecided || isKept) return [];
    const faults: string[] = [];
    if (
      wanted &&
      story.isOpen &&
      !notesOf(start, 'tab').some(({ mark }) => mark?.note === wanted.note.trim())
    )
      faults.push(`the note ${wanted.note} of mark ${start} was lost without a word`);
    const row = rowsOf(start)[0];
    if (row && confidenceElsewhere && !story.wasDeletedOnce && row.event.confidence !== confidenceElsewhere)
      faults.push(`the confidence of mark ${start}, changed elsewhere, was lost without a word`);
    return faults;
  }

  function overwritten(start: number, story: Story): string[] {
    if (story.wasDecided) return [];
    const writes = notesOf(start);
    return writes.flatMap(({ mark, by }, index) => {
      const next = writes[index + 1];
      const isNew = by === 'elsewhere' && mark?.note !== writes[index - 1]?.mark?.note;
      const isGone = next?.by === 'tab' && next.mark?.note !== mark?.note;
      const note = mark?.note ?? '';
      return isNew && isGone && !story.seenNotes.has(note)
        ? [`the note ${note} of mark ${start}, from elsewhere, was overwritten by ${next.mark?.note}`]
        : [];
    });
  }

  return { stories, kept, findHidden, findFaults };
}

export function startOf({ wish, base, sent, theirs }: OutboxEntry): number {
  return (wish ?? base?.mark ?? sent.find((form) => form !== null) ?? theirs)?.startSample ?? -1;
}

function say(mark: MarkFields | null): string {
  return mark ? `${mark.classKey} "${mark.note}"` : 'deleted';
}
