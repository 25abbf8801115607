import type { Gate } from '@shared/contract/collections.ts';
import type { SignKind } from '@/components/app/sign-kind.ts';

interface GateStateWords {
  label: string;
  sign: SignKind;
}

export const gateStateWords: Readonly<Record<Gate['state'], GateStateWords>> = {
  open: { label: 'Open', sign: 'attention' },
  closed: { label: 'In order', sign: 'success' },
  told: { label: 'Told', sign: 'info' },
};

export const gateTitles: Readonly<Record<Gate['key'], string>> = {
  empty: 'Recordings',
  sharing: 'Sharing',
  processing: 'Measurement',
  licence: 'Licences',
  credit: 'Credit',
  passes: 'Marks',
};

const order: readonly Gate['state'][] = ['open', 'told', 'closed'];

/** What still has to be done stands first. */
export function gatesInOrder(gates: readonly Gate[]): Gate[] {
  return [...gates].sort((a, b) => order.indexOf(a.state) - order.indexOf(b.state));
}

/** Name of the page that closes a gate, for its link. */
export function gateLinkWords(href: string): string {
  if (href.startsWith('/runs/')) return 'Open the run';
  if (href.startsWith('/recordings/')) return 'Open the recording';
  return 'To the recordings of this collection';
}

/** Gates about single recordings can be closed by taking those out. */
export function canTakeOut({ key, state }: Gate): boolean {
  return state === 'open' && key !== 'licence';
}

export function gatesHeadline(gates: readonly Gate[]): string {
  const openCount = gates.filter((gate) => gate.state === 'open').length;
  if (openCount === 0) return 'Nothing forbids a release.';
  return openCount === 1
    ? 'One thing still forbids a release.'
    : `${openCount} things still forbid a release.`;
}
