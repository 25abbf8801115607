import type { Home, HomeSectionKey } from '@shared/contract/home.ts';
import { formatCount } from '@/composables/useFormat.ts';

interface SectionWords {
  title: string;
  /** What stands there when nothing waits, and what one may do instead. */
  emptyTitle: string;
  emptyHint: string;
  action?: { label: string; to: string };
  /** Count in the lead: "2 passes to finish". Sections that only inform have none. */
  task?: readonly [one: string, many: string];
}

export const sectionWords: Readonly<Record<HomeSectionKey, SectionWords>> = {
  'to-decide': {
    title: 'Held uploads to decide',
    emptyTitle: 'No upload waits for a decision.',
    emptyHint: 'A recording comes here when something in it, or about it, may be sensitive.',
    task: ['held upload to decide', 'held uploads to decide'],
  },
  'my-passes': {
    title: 'Passes assigned to you',
    emptyTitle: 'No pass is assigned to you.',
    emptyHint: 'A curator assigns recordings; they appear here with their likely minutes.',
    task: ['pass to finish', 'passes to finish'],
  },
  'overdue-passes': {
    title: 'Overdue passes',
    emptyTitle: 'No pass is overdue.',
    emptyHint: 'A pass comes here when its due date has gone by and it is still open.',
    action: { label: 'Look through all passes', to: '/passes' },
    task: ['overdue pass', 'overdue passes'],
  },
  'failed-measurements': {
    title: 'Measurements that failed',
    emptyTitle: 'Every measurement went through.',
    emptyHint: 'One that fails is kept here with its reason, to be tried again.',
    task: ['failed measurement', 'failed measurements'],
  },
  'my-uploads': {
    title: 'Your uploads',
    emptyTitle: 'Nothing of yours is on its way.',
    emptyHint: 'Create a run, then bring in what was recorded; the measurements appear while you watch.',
    action: { label: 'Bring in a recording', to: '/bring-in' },
  },
  'held-mine': {
    title: 'Your recordings that wait for a reviewer',
    emptyTitle: 'None of your recordings is held.',
    emptyHint: 'A held recording stays with your lab until a reviewer who is not its uploader decides.',
  },
  'to-assign': {
    title: 'Shared recordings that nobody marks yet',
    emptyTitle: 'Every shared recording has a pass.',
    emptyHint: 'When a lab shares a recording, it comes here to be assigned.',
    action: { label: 'Look through the runs', to: '/runs' },
    task: ['recording to assign', 'recordings to assign'],
  },
  'releases-in-preparation': {
    title: 'Releases in preparation',
    emptyTitle: 'No release is in preparation.',
    emptyHint: 'Choose recordings for a collection; its gates say what still forbids a release.',
    action: { label: 'Open the collections', to: '/collections' },
    task: ['release in preparation', 'releases in preparation'],
  },
};

const NUMBER_WORDS = [
  'Nothing',
  'One',
  'Two',
  'Three',
  'Four',
  'Five',
  'Six',
  'Seven',
  'Eight',
  'Nine',
  'Ten',
];

function tasksOf(home: Home): { count: number; words: string }[] {
  return home.sections.flatMap(({ key, total }) => {
    const task = sectionWords[key].task;
    return task && total > 0 ? [{ count: total, words: formatCount(total, ...task) }] : [];
  });
}

/** The headline of the home page: "Three things wait for you". */
export function homeHeadline(home: Home): string {
  const count = tasksOf(home).reduce((sum, task) => sum + task.count, 0);
  if (count === 0) return 'Nothing waits for you';
  const number = NUMBER_WORDS[count] ?? String(count);
  return count === 1 ? `${number} thing waits for you` : `${number} things wait for you`;
}

/** What it is that waits, in one sentence. */
export function homeLead(home: Home): string {
  const tasks = tasksOf(home).map((task) => task.words);
  if (tasks.length > 0) return `${new Intl.ListFormat('en-GB').format(tasks)}.`;
  return home.sections.length > 0
    ? 'What comes next for you will appear here.'
    : 'You may browse, download and cite what has been released.';
}
