import { ProblemError } from '../../http/problem.ts';

export function linkUsed(): ProblemError {
  return new ProblemError('gone', 'This link was used already, or its time is over. Ask for a new one.');
}
