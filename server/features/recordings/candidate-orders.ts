import { setImmediate as nextTurn } from 'node:timers/promises';
import { LRUCache } from 'lru-cache';
import type {
  CandidateFilters,
  CandidateSort,
  CandidateSortKey,
} from '../../../shared/contract/candidates.ts';
import type { Reader } from '../../db/client.ts';
import { risingPlaces, writeKeys } from './candidate-order.ts';
import { selectSortValues, type DetectorRunRow } from './candidates.queries.ts';

export interface OrderQuery {
  run: Pick<DetectorRunRow, 'id' | 'candidateCount'>;
  sort: CandidateSort;
  filters: CandidateFilters;
}

/** Candidates in an order, by their ordinals. */
export interface CandidateOrder {
  count: number;
  /** Those at the ranks from `first`, at most `limit`. */
  ordinalsFrom(first: number, limit: number): number[];
}

/** Rows that are read at once; requests are answered between two readings. */
const rowsPerSlice = 5_000;
const bytesKept = 32 * 1024 * 1024;

export type CandidateOrders = ReturnType<typeof createCandidateOrders>;

/**
 * Orders of candidates, so that any place of a long list can be shown at once: each is made when it is first asked for and
 * kept as long as there is room. It stays true, since the candidates of a run of the detector never change.
 */
export function createCandidateOrders(db: Reader) {
  const kept = new LRUCache<string, Uint32Array, OrderQuery>({
    maxSize: bytesKept,
    sizeCalculation: ({ byteLength }) => byteLength + 1,
    fetchMethod: (_key, _stale, { context }) => rank(db, context),
    // Whoever waits gets the order, also where there was no room to keep it.
    ignoreFetchAbort: true,
  });

  async function find(query: OrderQuery): Promise<CandidateOrder> {
    const { run, sort, filters } = query;
    const given = Object.entries(filters).filter(([, value]) => value !== undefined);
    if (sort === 'onset' && given.length === 0) return everything(run.candidateCount);
    const key = JSON.stringify([run.id, sort, given.sort()]);
    return orderOf(await kept.forceFetch(key, { context: query }));
  }

  return { find };
}

function orderOf(ordinals: Uint32Array): CandidateOrder {
  return {
    count: ordinals.length,
    ordinalsFrom: (first, limit) => [...ordinals.subarray(first, first + limit)],
  };
}

/** Ordinals count by onset, so that here the rank is the ordinal. */
function everything(count: number): CandidateOrder {
  return {
    count,
    ordinalsFrom: (first, limit) =>
      Array.from({ length: Math.max(0, Math.min(limit, count - first)) }, (_value, index) => first + index),
  };
}

async function rank(db: Reader, { run, sort, filters }: OrderQuery): Promise<Uint32Array> {
  const isDescending = sort.startsWith('-');
  const key = (isDescending ? sort.slice(1) : sort) as CandidateSortKey;
  const keys = new Float64Array(run.candidateCount);
  const ordinals = new Uint32Array(run.candidateCount);
  let count = 0;
  for (let from = 0; from < run.candidateCount; from += rowsPerSlice) {
    const within = { detectorRunId: run.id, from, to: from + rowsPerSlice };
    const found = selectSortValues(db, within, filters, key);
    ordinals.set(found.ordinals, count);
    writeKeys(keys.subarray(count), found.values, isDescending);
    count += found.ordinals.length;
    await nextTurn();
  }
  return risingPlaces(keys.subarray(0, count)).map((place) => ordinals[place]!);
}
