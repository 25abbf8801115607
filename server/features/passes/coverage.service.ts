import type { AddCoverage, Coverage, CoverageSpan } from '../../../shared/contract/coverage.ts';
import type { PassCoverage } from '../../../shared/contract/passes.ts';
import {
  coarsestSamplesPerPixel,
  shareCovered,
  spansOfChannel,
  zoomStep,
  type CoveredSpan,
  type PassExtent,
} from '../../../shared/domain/coverage-rule.ts';
import { partOfPass } from '../../../shared/domain/pass-windows.ts';
import { intersectSpans } from '../../../shared/domain/span-set.ts';
import type { Actor } from '../../../shared/policy/actor.ts';
import { withheldOf } from '../../authorize/withheld.ts';
import type { Reader, Tx } from '../../db/client.ts';
import { write } from '../../db/transaction.ts';
import type { Ground } from '../../ground.ts';
import { conflict, invalidField, notFound } from '../../http/problem.ts';
import {
  deleteCoverage,
  insertCoverage,
  selectCoverage,
  selectTouching,
  type CoverageRow,
} from './coverage.queries.ts';
import { requireOwnOpenView } from './pass-checks.ts';
import { selectPassWithContext, type PassWithContext } from './passes.queries.ts';

type Parts = Pick<Ground, 'db' | 'clock' | 'ids'>;

export type CoverageService = ReturnType<typeof createCoverageService>;

/** What was looked at and heard. It is no change that anybody decides on, so the audit log has none of it. */
export function createCoverageService({ db, clock, ids }: Parts) {
  /** Joins the spans with what is there: a batch that comes twice changes nothing. */
  function add(actor: Actor, passId: string, { spans }: AddCoverage): PassCoverage {
    return write(db, (tx) => {
      const view = requireOwnOpenView(tx, actor, passId);
      if (view.pass.task === 'phases')
        throw conflict(
          'In a pass of growth phases the sound is kept back, so nothing of it is seen or heard.',
        );
      const extent = extentOf(view);
      for (const span of spans) join(tx, view, cutToPart(checked(span, view), extent));
      return sharesOf(selectCoverage(tx, passId), extent);
    });
  }

  function join(tx: Tx, { pass }: PassWithContext, spans: CoverageSpan[]): void {
    const nowMs = clock.nowMs();
    for (const { startSample, endSample, ...facts } of spans) {
      const lane = { ...facts, passId: pass.id };
      const touching = selectTouching(tx, lane, { startSample, endSample });
      deleteCoverage(
        tx,
        touching.map(({ id }) => id),
      );
      insertCoverage(tx, {
        ...lane,
        id: ids.next(),
        startSample: Math.min(startSample, ...touching.map((row) => row.startSample)),
        endSample: Math.max(endSample, ...touching.map((row) => row.endSample)),
        firstAtMs: Math.min(nowMs, ...touching.map((row) => row.firstAtMs)),
        lastAtMs: nowMs,
      });
    }
  }

  /** For the labeler of the pass, and for curators, unless they mark the recording blind themselves. */
  function get(actor: Actor, passId: string): Coverage {
    const view = selectPassWithContext(db, passId);
    if (!view || !mayRead(db, actor, view)) throw notFound('This pass');
    const rows = selectCoverage(db, passId);
    const extent = extentOf(view);
    return {
      ...sharesOf(rows, extent),
      seen: joined(rows, 'seen', extent),
      heard: joined(rows, 'heard', extent),
    };
  }

  return { add, get };
}

function mayRead(db: Reader, actor: Actor, { pass, sharing }: PassWithContext): boolean {
  if (sharing !== 'shared') return false;
  const isOwn = pass.labelerId === actor.id && actor.roles.includes('labeler') && pass.state !== 'cancelled';
  if (isOwn) return true;
  return actor.roles.includes('curator') && !withheldOf(db, actor, pass.recordingId).blind;
}

export function extentOf({ pass, frames, channels }: PassWithContext): PassExtent {
  return { part: partOfPass(pass.windows, frames), channels };
}

export function coverageOf(db: Reader, view: PassWithContext): PassCoverage {
  return sharesOf(selectCoverage(db, view.pass.id), extentOf(view));
}

function checked(span: CoverageSpan, { frames, channels, sampleRateHz }: PassWithContext): CoverageSpan {
  if (span.channel >= channels)
    throw invalidField('spans', 'name a channel that this recording does not have');
  if (span.endSample > frames) throw invalidField('spans', 'end after the recording');
  if (span.way === 'heard') return span;
  if (span.detail > coarsestSamplesPerPixel(sampleRateHz))
    throw invalidField('spans', 'were looked at from so far that a short burst could not be seen');
  return { ...span, detail: zoomStep(span.detail, sampleRateHz) };
}

/** What lies outside the part of the pass is not kept. */
function cutToPart(span: CoverageSpan, { part }: PassExtent): CoverageSpan[] {
  return intersectSpans([span], part).map((piece) => ({ ...span, ...piece }));
}

function sharesOf(rows: readonly CoverageRow[], extent: PassExtent): PassCoverage {
  const ofWay = (way: CoverageRow['way']) => rows.filter((row) => row.way === way);
  return {
    seenShare: shareCovered(ofWay('seen'), extent),
    heardShare: shareCovered(ofWay('heard'), extent),
  };
}

function joined(
  rows: readonly CoverageRow[],
  way: CoverageRow['way'],
  { channels }: PassExtent,
): CoveredSpan[] {
  const ofWay = rows.filter((row) => row.way === way);
  return Array.from({ length: channels }, (_, channel) =>
    spansOfChannel(ofWay, channel).map((span) => ({ ...span, channel })),
  ).flat();
}
