import type { Gate } from '../../../shared/contract/collections.ts';
import { allowedWholeLicences, licenceMixRefusal } from '../../../shared/domain/licence-mix.ts';
import type { Member } from './collections.queries.ts';

const shown = 100;

/** What still forbids a release, what is in order, and what is only told. Each open gate names the page that closes it. */
export function gatesOf(collectionId: string, members: readonly Member[]): Gate[] {
  const ownPage = `/collections/${collectionId}`;
  if (members.length === 0)
    return [
      {
        key: 'empty',
        state: 'open',
        sentence: 'Nothing is in this collection yet.',
        href: ownPage,
        recordings: [],
      },
    ];
  return [
    sharingGate(members, ownPage),
    processingGate(members, ownPage),
    licenceGate(members, ownPage),
    creditGate(members),
    passesGate(members),
  ];
}

export function isReleasable(gates: readonly Gate[]): boolean {
  return gates.every((gate) => gate.state !== 'open');
}

function sharingGate(members: readonly Member[], href: string): Gate {
  const unshared = members.filter((member) => member.sharing !== 'shared');
  if (unshared.length === 0) return closed('sharing', 'Every recording is shared.');
  // A hold covers everything made from a recording, so its name is not told here.
  const recordings = unshared.slice(0, shown).map(({ recordingId }) => ({
    id: recordingId,
    fileName: `recording ${recordingId.slice(-6)}`,
    why: 'It is held, restricted to its lab or refused. Wait for the reviewer of its lab, or take it out.',
  }));
  const sentence = `${counted(unshared.length, 'recording is', 'recordings are')} not shared at present.`;
  return { key: 'sharing', state: 'open', sentence, href, recordings };
}

function processingGate(members: readonly Member[], href: string): Gate {
  const unmeasured = members.filter((member) => member.processing !== 'measured');
  if (unmeasured.length === 0) return closed('processing', 'Every recording is measured.');
  const sentence = `${counted(unmeasured.length, 'recording is', 'recordings are')} not measured yet.`;
  const why = 'It is waiting, being measured, or its measurement failed.';
  return { key: 'processing', state: 'open', sentence, href, recordings: named(unmeasured, why) };
}

function licenceGate(members: readonly Member[], href: string): Gate {
  const licences = members.map((member) => member.licence);
  const [loosest] = allowedWholeLicences(licences);
  if (loosest)
    return closed('licence', `The licences of the recordings go together; the whole may carry ${loosest}.`);
  const sentence =
    licenceMixRefusal(licences, 'CC-BY-4.0') ?? 'The licences of the recordings do not go together.';
  return { key: 'licence', state: 'open', sentence, href, recordings: [] };
}

function creditGate(members: readonly Member[]): Gate {
  const uncredited = members.filter((member) => member.credits.length === 0);
  const [first] = uncredited;
  if (!first) return closed('credit', 'Every run names whom to credit.');
  const runs = new Set(uncredited.map((member) => member.runId)).size;
  const sentence = `${counted(runs, 'run names', 'runs name')} nobody to credit; the lab can add it.`;
  const recordings = named(uncredited, 'Its run names nobody to credit.');
  return { key: 'credit', state: 'open', sentence, href: `/runs/${first.runId}`, recordings };
}

/** Told, counted and printed, but not forbidden: a bound here would only drop the hard recordings. */
function passesGate(members: readonly Member[]): Gate {
  const unmarked = members.filter((member) => member.finishedPasses === 0);
  const several = members.filter((member) => member.finishedPasses > 1);
  const single = members.length - unmarked.length - several.length;
  const sentences = [
    `${counted(single, 'recording has', 'recordings have')} one finished pass; its marks count as they are.`,
    unmarked.length > 0
      ? `${counted(unmarked.length, 'has', 'have')} no finished pass and goes in without marks.`
      : '',
    several.length > 0
      ? `${counted(several.length, 'has', 'have')} several finished passes; their marks go in person by person, and no events count as settled there.`
      : '',
  ];
  const recordings = [
    ...named(unmarked, 'No finished pass.'),
    ...named(several, 'Several finished passes that were not compared.'),
  ];
  return {
    key: 'passes',
    state: 'told',
    sentence: sentences.filter(Boolean).join(' '),
    href: null,
    recordings: recordings.slice(0, shown),
  };
}

function closed(key: Gate['key'], sentence: string): Gate {
  return { key, state: 'closed', sentence, href: null, recordings: [] };
}

function named(members: readonly Member[], why: string): Gate['recordings'] {
  return members.slice(0, shown).map(({ recordingId, fileName }) => ({ id: recordingId, fileName, why }));
}

function counted(count: number, one: string, many: string): string {
  return `${count} ${count === 1 ? one : many}`;
}
