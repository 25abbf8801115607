import { infoChunk } from '../../../server/setup/demo-audio/metadata-chunks.ts';
import { seededRandom } from '../../../shared/lib/seeded-random.ts';
import { asciiBytes, concatBytes, uint32 } from '../../../shared/audio/wav-envelope.ts';

/** A file as its parts say it is; `claims` is the size field, which need not be the truth. */
interface ChunkDraft {
  id: string;
  body: Uint8Array;
  claims: number;
  isPadded: boolean;
}

interface WavDraft {
  container: string;
  form: string;
  claims: number;
  chunks: ChunkDraft[];
}

/** Numbers that have broken parsers before. */
const edges = [
  0, 1, 2, 3, 7, 8, 0x7f, 0x80, 0xff, 0x7fff, 0xffff, 0x7fffffff, 0x80000000, 0xfffffff8, 0xfffffffe,
  0xffffffff,
];
const ids = [
  'fmt ',
  'data',
  'ds64',
  'LIST',
  'bext',
  'iXML',
  'cue ',
  'JUNK',
  'guan',
  'id3 ',
  'abcd',
  '\0\0\0\0',
];
const subtypeTail = [0, 0, 0, 0, 0x10, 0, 0x80, 0, 0, 0xaa, 0, 0x38, 0x9b, 0x71];

/** Makes broken WAV files from sound ones, always the same ones for a seed. */
export function wavMutator(seed: number): () => Uint8Array {
  const random = seededRandom(seed);
  const dice = new Dice(random);
  return () => {
    const draft = soundDraft(dice);
    for (let change = dice.below(4); change > 0; change--) dice.of(structureChanges)(draft, dice);
    let bytes = toBytes(draft);
    for (let change = dice.below(3); change > 0; change--) bytes = dice.of(byteChanges)(bytes, dice);
    return bytes;
  };
}

class Dice {
  readonly #random: () => number;
  constructor(random: () => number) {
    this.#random = random;
  }
  below(limit: number): number {
    return Math.floor(this.#random() * limit);
  }
  of<Item>(items: readonly Item[]): Item {
    return items[this.below(items.length)]!;
  }
  /** An edge, a small step from what was there, or anything. */
  near(value: number): number {
    const kind = this.below(3);
    if (kind === 0) return this.of(edges);
    return kind === 1 ? (value + this.below(19) - 9) >>> 0 : this.below(2 ** 32);
  }
}

type StructureChange = (draft: WavDraft, dice: Dice) => void;

const structureChanges: StructureChange[] = [
  (draft, dice) => changeOne(draft, dice, (chunk) => (chunk.claims = dice.near(chunk.claims))),
  (draft, dice) => changeOne(draft, dice, (chunk) => (chunk.id = dice.of(ids))),
  (draft, dice) => changeOne(draft, dice, (chunk) => (chunk.isPadded = !chunk.isPadded)),
  (draft, dice) => changeOne(draft, dice, (chunk) => (chunk.body = chunk.body.subarray(0, dice.below(70)))),
  (draft, dice) => (draft.claims = dice.near(draft.claims)),
  (draft, dice) => (draft.container = dice.of(['RIFF', 'RF64', 'BW64', 'RIFX', 'FORM'])),
  (draft, dice) => (draft.form = dice.of(['WAVE', 'WAVE', 'AVI ', 'wave'])),
  (draft, dice) => draft.chunks.splice(dice.below(draft.chunks.length), 1),
  (draft, dice) =>
    draft.chunks.splice(dice.below(draft.chunks.length + 1), 0, { ...dice.of(ownOrNew(draft)) }),
  (draft, dice) =>
    draft.chunks.reverse().splice(0, 0, ...draft.chunks.splice(dice.below(draft.chunks.length))),
  (draft, dice) => changeWords(draft, dice, 'fmt '),
  (draft, dice) => changeWords(draft, dice, 'ds64'),
  (draft, dice) => changeWords(draft, dice, 'LIST'),
  (draft, dice) => changeWords(draft, dice, 'cue '),
  giveTable,
  nestList,
  nestFile,
];

function ownOrNew({ chunks }: WavDraft): ChunkDraft[] {
  return chunks.length > 0 ? chunks : [chunk('JUNK', new Uint8Array(9))];
}

function changeOne({ chunks }: WavDraft, dice: Dice, change: (chunk: ChunkDraft) => void): void {
  if (chunks.length > 0) change(dice.of(chunks));
}

/** Puts another number over two or four bytes within the chunks of one id. */
function changeWords({ chunks }: WavDraft, dice: Dice, id: string): void {
  for (const own of chunks.filter((one) => one.id === id && one.body.length >= 4)) {
    own.body = own.body.slice();
    const view = new DataView(own.body.buffer);
    const at = dice.below(own.body.length - 3);
    if (dice.below(2) === 0) view.setUint16(at, dice.near(view.getUint16(at, true)), true);
    else view.setUint32(at, dice.near(view.getUint32(at, true)), true);
  }
}

/** A table of 64-bit sizes, true or not, with fewer or more entries than it says. */
function giveTable({ chunks }: WavDraft, dice: Dice): void {
  const entries = Array.from({ length: dice.below(80) }, () =>
    concatBytes([asciiBytes(dice.of(ids)), uint32(dice.near(100)), uint32(dice.of([0, 0, 1, 0xffffffff]))]),
  );
  const fixed = concatBytes(Array.from({ length: 6 }, () => uint32(dice.near(180))));
  const count = uint32(dice.below(2) === 0 ? entries.length : dice.of(edges));
  chunks.unshift(chunk('ds64', concatBytes([fixed, count, ...entries])));
  for (const own of chunks) if (dice.below(3) === 0) own.claims = 0xffffffff;
}

/** A list in a list in a list, with sizes that fit or do not. */
function nestList({ chunks }: WavDraft, dice: Dice): void {
  let body = concatBytes([asciiBytes('INFOIART'), uint32(4), asciiBytes('some')]);
  for (let depth = dice.below(40); depth > 0; depth--) {
    body = concatBytes([
      asciiBytes(dice.of(['INFO', 'adtl'])),
      asciiBytes('LIST'),
      uint32(dice.near(body.length)),
      body,
    ]);
  }
  chunks.splice(dice.below(chunks.length + 1), 0, chunk('LIST', body));
}

/** A whole file as the body of one of its chunks. */
function nestFile(draft: WavDraft, dice: Dice): void {
  const inner = chunk(dice.of(ids), toBytes(draft));
  draft.chunks.splice(dice.below(draft.chunks.length + 1), 0, inner);
}

type ByteChange = (bytes: Uint8Array, dice: Dice) => Uint8Array;

const byteChanges: ByteChange[] = [
  (bytes, dice) => overwritten(bytes, dice, Uint8Array.of(dice.below(256))),
  (bytes, dice) => overwritten(bytes, dice, uint32(dice.of(edges))),
  (bytes, dice) => bytes.slice(0, dice.below(bytes.length + 1)),
  (bytes, dice) => {
    const at = dice.below(bytes.length);
    return concatBytes([bytes.subarray(0, at), bytes.subarray(at + 1 + dice.below(9))]);
  },
  (bytes, dice) => {
    const at = dice.below(bytes.length);
    return concatBytes([bytes.subarray(0, at), bytes.subarray(Math.max(0, at - dice.below(40)))]);
  },
];

function overwritten(bytes: Uint8Array, dice: Dice, patch: Uint8Array): Uint8Array {
  if (bytes.length < patch.length) return bytes;
  const copy = bytes.slice();
  copy.set(patch, dice.below(bytes.length - patch.length + 1));
  return copy;
}

function soundDraft(dice: Dice): WavDraft {
  const container = dice.of(['RIFF', 'RF64', 'BW64']);
  const data = chunk('data', new Uint8Array(6 * dice.below(60)));
  const wide = concatBytes([...[0, 0, data.body.length, 0, 30, 0].map(uint32), uint32(0)]);
  const isWide = container !== 'RIFF';
  if (isWide) data.claims = 0xffffffff;
  const beside = [
    infoChunk({ ISFT: 'recorder 1', IART: 'somebody' }),
    { id: 'bext', body: new Uint8Array(603).fill(0x41) },
    { id: 'iXML', body: asciiBytes('<BWFXML><USER>somebody</USER></BWFXML>') },
    { id: 'cue ', body: concatBytes([uint32(1), new Uint8Array(24)]) },
  ].map(({ id, body }) => chunk(id, body));
  const extra = beside.filter(() => dice.below(2) === 0);
  const chunks = [...(isWide ? [chunk('ds64', wide)] : []), chunk('fmt ', formatBody(dice)), ...extra, data];
  return { container, form: 'WAVE', claims: isWide ? 0xffffffff : 1000, chunks };
}

/** Two channels of 24 bits, plain or extensible. */
function formatBody(dice: Dice): Uint8Array {
  const tag = dice.below(2) === 0 ? [0xfe, 0xff] : [1, 0];
  const plain = [...tag, 2, 0, 0, 0xee, 2, 0, 0, 0x94, 0x11, 0, 6, 0, 24, 0];
  if (tag[0] === 1) return Uint8Array.from(plain);
  return Uint8Array.from([...plain, 22, 0, 24, 0, 3, 0, 0, 0, 1, 0, ...subtypeTail]);
}

function chunk(id: string, body: Uint8Array): ChunkDraft {
  return { id, body, claims: body.length, isPadded: true };
}

function toBytes({ container, form, claims, chunks }: WavDraft): Uint8Array {
  const parts = chunks.flatMap(({ id, body, claims: size, isPadded }) => [
    asciiBytes(id),
    uint32(size),
    body,
    new Uint8Array(isPadded ? body.length % 2 : 0),
  ]);
  return concatBytes([asciiBytes(container), uint32(claims), asciiBytes(form), ...parts]);
}
