import type { RoundItem, RoundPage, RoundQuery, StoredAnswer } from '../../../shared/contract/rounds.ts';
import type { Actor } from '../../../shared/policy/actor.ts';
import type { Ground } from '../../ground.ts';
import type { EventsService } from '../events/events.service.ts';
import type { PassesService } from '../passes/passes.service.ts';
import type { CandidatesService } from '../recordings/candidates.service.ts';
import { createRoundAccess, type RoundAccess } from './round-access.ts';
import type { OrderOfRound, RoundOrders } from './round-orders.ts';
import { toCandidate, toProgress, toStoredAnswer } from './rounds.map.ts';
import {
  countVerdicts,
  selectAnsweredOrdinals,
  selectCandidatesAt,
  selectVerdicts,
  type AnsweredCandidate,
} from './rounds.queries.ts';

interface Parts extends Pick<Ground, 'db'> {
  passes: PassesService;
  candidates: CandidatesService;
  events: EventsService;
  orders: RoundOrders;
}

export type RoundsService = ReturnType<typeof createRoundsService>;

/** Candidates one after another, with what was answered to them. */
export function createRoundsService({ db, passes, candidates, events, orders }: Parts) {
  const requireRound = createRoundAccess({ db, passes, candidates });

  async function page(actor: Actor, passId: string, query: RoundQuery): Promise<RoundPage> {
    const { pass, run } = requireRound(actor, passId);
    const order = query.order ?? pass.roundOrder ?? 'time';
    const found = await orders.find(run, order);
    // It may have been finished, or taken back, while the order was made.
    const access = requireRound(actor, passId);
    const firstUnanswered = findUnanswered(found, selectAnsweredOrdinals(db, passId));
    const firstRank = query.rank ?? firstUnanswered ?? found.ordinals.length;
    const items = itemsFrom(access, found, firstRank, query.limit);
    const keys = new Set(items.map(({ groupKey }) => groupKey));
    return {
      order,
      isReplaced: access.isReplaced,
      progress: toProgress(run.candidateCount, countVerdicts(db, passId)),
      firstUnanswered,
      firstRank,
      items,
      groups: found.groups.filter(({ key }) => keys.has(key)),
    };
  }

  function itemsFrom(
    { pass, run, recording }: RoundAccess,
    found: OrderOfRound,
    firstRank: number,
    limit: number,
  ): RoundItem[] {
    const ordinals = [...found.ordinals.subarray(firstRank, firstRank + limit)];
    const rows = selectCandidatesAt(db, run.id, ordinals);
    const byOrdinal = new Map(rows.map((row) => [row.ordinal, row]));
    const answers = answersOf(pass.id, rows);
    return ordinals.flatMap((ordinal, index) => {
      const row = byOrdinal.get(ordinal);
      if (row === undefined) return [];
      const rank = firstRank + index;
      const candidate = toCandidate(row, recording.format.sampleRateHz);
      const groupKey = groupAt(found, rank)?.key ?? null;
      const answer = answers.get(row.id) ?? null;
      return [{ rank, candidate, isDrawn: found.isDrawn(rank), groupKey, answer }];
    });
  }

  /** Without those whose mark was deleted since. */
  function answersOf(passId: string, rows: readonly AnsweredCandidate[]): Map<string, StoredAnswer> {
    const ids = rows.map(({ id }) => id);
    const answers = new Map<string, StoredAnswer>();
    for (const verdict of selectVerdicts(db, passId, ids)) {
      const mark = verdict.eventId === null ? null : (events.within.find(db, verdict.eventId) ?? null);
      if (mark === null || mark.deletedAtMs === null)
        answers.set(verdict.candidateId, toStoredAnswer(verdict, mark));
    }
    return answers;
  }

  return { page };
}

function findUnanswered({ ordinals }: OrderOfRound, answered: readonly number[]): number | null {
  const isAnswered = new Uint8Array(ordinals.length);
  for (const ordinal of answered) isAnswered[ordinal] = 1;
  const rank = ordinals.findIndex((ordinal) => isAnswered[ordinal] !== 1);
  return rank < 0 ? null : rank;
}

function groupAt({ groups }: OrderOfRound, rank: number) {
  let low = 0;
  let high = groups.length;
  while (low < high) {
    const middle = (low + high) >> 1;
    if (groups[middle]!.firstRank <= rank) low = middle + 1;
    else high = middle;
  }
  return groups[low - 1];
}
