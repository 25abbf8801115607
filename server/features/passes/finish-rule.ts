import type { PassCoverage } from '../../../shared/contract/passes.ts';
import { coveredShare } from '../../../shared/domain/coverage-rule.ts';
import { invalidField } from '../../http/problem.ts';

/** What a pass has come to: a share of its part for the eyes, a number of candidates for rounds, neither for phases. */
export interface PassResult {
  coverage: PassCoverage | null;
  unanswered: number;
}

/** "No event" is not "not looked": whoever leaves something out says why. */
export function requireReason({ coverage, unanswered }: PassResult, remark: string): void {
  if (remark !== '') return;
  if (unanswered > 0)
    throw invalidField(
      'remark',
      `is needed: ${unanswered} ${unanswered === 1 ? 'candidate has' : 'candidates have'} no answer yet; say why they are left out`,
    );
  if (coverage === null || coverage.seenShare >= coveredShare) return;
  const percent = Math.floor(coverage.seenShare * 100);
  throw invalidField('remark', `is needed: ${percent} % of the part was seen; say why the rest was left out`);
}
