/** The fields of a mark, whatever they are: what is added to marks later is merged and compared like the rest. */
export type Fields = Readonly<Record<string, unknown>>;

/** Values of JSON. The server trims what is written by hand, so text is compared without its margins. */
export function isSameValue(a: unknown, b: unknown): boolean {
  if (typeof a === 'string' && typeof b === 'string') return a.trim() === b.trim();
  if (typeof a !== 'object' || typeof b !== 'object' || a === null || b === null) return Object.is(a, b);
  const [one, other] = [a as Fields, b as Fields];
  const names = new Set([...Object.keys(one), ...Object.keys(other)]);
  return [...names].every((name) => isSameValue(one[name], other[name]));
}

/** Whether everything that `asked` says is so in `present`, which may say more. */
export function holdsAll(present: Fields, asked: Fields): boolean {
  return Object.entries(asked).every(([name, value]) => isSameValue(present[name], value));
}

/** What has to be changed to come from one form to the other; fields that only `from` has stay as they are. */
export function changedFields(from: Fields, to: Fields): Fields {
  return Object.fromEntries(Object.entries(to).filter(([name, value]) => !isSameValue(from[name], value)));
}

export interface Merge<Form> {
  /** Both changes together; where both changed a field, it has the value that was preferred. */
  merged: Form;
  /** Fields that both changed, each to another value. */
  clashes: string[];
}

interface MergeInput<Form> {
  /** What both changes began from. */
  base: Fields;
  mine: Form;
  theirs: Form;
  /** Forms that were sent and may have been stored: what equals one of them is no change of somebody else. */
  sent?: readonly Fields[];
  prefer?: 'mine' | 'theirs';
}

/** Each pair must stay in this order; a merge that would turn it around is a clash of both fields. */
const RISING = [
  ['startSample', 'endSample'],
  ['lowHz', 'highHz'],
] as const;

/** A field that only makes sense beside another goes with it, where that one was changed. */
const GOES_WITH: Readonly<Record<string, string>> = { rawStartSample: 'startSample', candidateId: 'origin' };

/** How a mark was made, not what it says: nobody is asked about these. */
const CIRCUMSTANCES = ['uncertaintySamples', 'aids', 'view'];

/** Brings two changes of one mark together field by field. */
export function mergeFields<Form extends object>(input: MergeInput<Form>): Merge<Form> {
  const { base, sent = [], prefer = 'mine' } = input;
  const mine = input.mine as Fields;
  const theirs = input.theirs as Fields;
  // Also what was sent and then taken back: the server may have it.
  const isMine = (name: string) => [mine, ...sent].some((form) => !isSameValue(form[name], base[name]));
  const isTheirs = (name: string) =>
    !isSameValue(theirs[name], base[name]) && !sent.some((form) => isSameValue(form[name], theirs[name]));
  const isClash = (name: string) => isMine(name) && isTheirs(name) && !isSameValue(mine[name], theirs[name]);
  const sideOf = (name: string) => (isClash(name) ? prefer : isMine(name) ? 'mine' : 'theirs');
  const names = Object.keys(mine);
  const isMoved = (name: string) => name in mine && (isMine(name) || isTheirs(name));
  const pick = (name: string) => {
    const lead = GOES_WITH[name];
    return (sideOf(lead !== undefined && isMoved(lead) ? lead : name) === 'mine' ? mine : theirs)[name];
  };
  const merged = Object.fromEntries(names.map((name) => [name, pick(name)]));
  const turned = RISING.flatMap((pair) => (isTurned(merged, pair) ? keepPair(merged, pair) : []));
  const asked = names.filter((name) => !CIRCUMSTANCES.includes(name) && GOES_WITH[name] === undefined);
  const clashes = [...new Set([...asked.filter(isClash), ...turned])];
  return { merged: merged as Form, clashes };

  function keepPair(form: Record<string, unknown>, pair: readonly [string, string]): string[] {
    const side = prefer === 'mine' ? mine : theirs;
    for (const name of [...pair, ...names.filter((one) => pair.includes(GOES_WITH[one] ?? ''))])
      form[name] = side[name];
    return [...pair];
  }
}

function isTurned(form: Fields, [low, high]: readonly [string, string]): boolean {
  const from = form[low];
  const to = form[high];
  return typeof from === 'number' && typeof to === 'number' && from >= to;
}
