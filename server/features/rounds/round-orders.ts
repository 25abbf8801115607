import { setImmediate as nextTurn } from 'node:timers/promises';
import { LRUCache } from 'lru-cache';
import type { RoundOrder } from '../../../shared/contract/passes.ts';
import type { RoundGroup } from '../../../shared/contract/rounds.ts';
import type { Reader } from '../../db/client.ts';
import { isDrawnPlace, mixDrawn, uncertaintyOf } from '../../signal/candidate-uncertainty.ts';
import { descriptorNames, type CandidateDescriptors } from '../../signal/look-alike-features.ts';
import type { LookAlikeGroup } from '../../signal/look-alike-group.ts';
import { lookAlikesVersion } from '../../signal/look-alikes.ts';
import { risingPlaces, writeKeys } from '../recordings/candidate-order.ts';
import { selectFacts, type DetectorRunRow, type FactColumn, type ParameterName } from './rounds.queries.ts';

/** Candidates of a run in the order in which a round offers them. */
export interface OrderOfRound {
  /** By rank. */
  ordinals: Uint32Array;
  /** Empty where they are not grouped. */
  groups: readonly RoundGroup[];
  isDrawn(rank: number): boolean;
}

type Run = Pick<DetectorRunRow, 'id' | 'candidateCount'>;
type FindLookAlikes = (descriptors: CandidateDescriptors) => Promise<LookAlikeGroup[]>;
type FactName = FactColumn | ParameterName;

/** Rows that are read at once; requests are answered between two readings. */
const rowsPerSlice = 5_000;
const bytesKept = 32 * 1024 * 1024;
const bytesPerGroup = 200;

export type RoundOrders = ReturnType<typeof createRoundOrders>;

/** Each order is made when it is first asked for and kept as long as there is room: the rows of a run never change. */
export function createRoundOrders(db: Reader, findLookAlikes: FindLookAlikes) {
  const kept = new LRUCache<string, OrderOfRound, { run: Run; order: RoundOrder }>({
    maxSize: bytesKept,
    sizeCalculation: ({ ordinals, groups }) => ordinals.byteLength + bytesPerGroup * groups.length + 1,
    fetchMethod: (_key, _stale, { context }) => makers[context.order](context.run),
    ignoreFetchAbort: true,
  });

  const makers: Record<RoundOrder, (run: Run) => Promise<OrderOfRound>> = {
    time: (run) => Promise.resolve(plain(everyPlace(run.candidateCount))),
    strength: async (run) => plain(falling((await readFacts(run, ['snrDb'])).snrDb)),
    uncertainty: async (run) => mixed(falling(uncertaintyOf(await uncertaintyFacts(run)))),
    likeness: async (run) => grouped(await findLookAlikes(await descriptorsOf(run))),
  };

  async function uncertaintyFacts(run: Run) {
    return readFacts(run, ['snrDb', 'shareAcross']);
  }

  async function descriptorsOf(run: Run): Promise<CandidateDescriptors> {
    const facts = await readFacts(run, descriptorNames);
    const columns = descriptorNames.map((name) => [
      name,
      Float64Array.from(facts[name], (value) => value ?? NaN),
    ]);
    return Object.fromEntries(columns) as unknown as CandidateDescriptors;
  }

  async function readFacts<Name extends FactName>(run: Run, names: readonly Name[]) {
    const facts = Object.fromEntries(names.map((name) => [name, [] as (number | null)[]])) as Record<
      Name,
      (number | null)[]
    >;
    for (let from = 0; from < run.candidateCount; from += rowsPerSlice) {
      const slice = selectFacts(db, { detectorRunId: run.id, from, to: from + rowsPerSlice }, names);
      for (const name of names) for (const value of slice[name]) facts[name].push(value);
      await nextTurn();
    }
    return facts;
  }

  return {
    find: (run: Run, order: RoundOrder) => kept.forceFetch(`${run.id} ${order}`, { context: { run, order } }),
  };
}

function everyPlace(count: number): Uint32Array {
  return Uint32Array.from({ length: count }, (_value, place) => place);
}

/** Ordinals by falling value; what has none comes last, equal ones by time. */
function falling(values: ArrayLike<number | null>): Uint32Array {
  const keys = new Float64Array(values.length);
  writeKeys(keys, Array.from(values), true);
  return risingPlaces(keys);
}

function plain(ordinals: Uint32Array): OrderOfRound {
  return { ordinals, groups: [], isDrawn: () => false };
}

/** The same draw for every round over a run, so that two people are shown the same ones. */
function mixed(ordinals: Uint32Array): OrderOfRound {
  return { ordinals: mixDrawn(ordinals, ordinals.length), groups: [], isDrawn: isDrawnPlace };
}

function grouped(found: readonly LookAlikeGroup[]): OrderOfRound {
  const ordinals = new Uint32Array(found.reduce((sum, { members }) => sum + members.length, 0));
  let firstRank = 0;
  const groups = found.map(({ members, spotChecks }, index) => {
    ordinals.set(members, firstRank);
    const place = { number: index + 1, groups: found.length, size: members.length, firstRank, spotChecks };
    firstRank += members.length;
    return { key: `look-alikes-${lookAlikesVersion}.${index + 1}`, ...place };
  });
  return { ordinals, groups, isDrawn: () => false };
}
