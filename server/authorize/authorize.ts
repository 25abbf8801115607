import { abilityFor, may } from '../../shared/policy/ability.ts';
import type { Actor } from '../../shared/policy/actor.ts';
import type { Action, SubjectFields, SubjectName } from '../../shared/policy/subjects.ts';
import { forbidden, notFound } from '../http/problem.ts';

interface Question<Name extends SubjectName> {
  action: Action;
  name: Name;
  row: SubjectFields[Name];
  /** The sentence of a 403. */
  detail?: string;
}

export function isAllowed<Name extends SubjectName>(actor: Actor | null, question: Question<Name>): boolean {
  return may(abilityFor(actor), question.action, question.name, question.row);
}

/** Throws 404 where the row may not even be read (its existence is a secret), 403 where only the action is refused. */
export function authorize<Name extends SubjectName>(actor: Actor | null, question: Question<Name>): void {
  if (isAllowed(actor, question)) return;
  if (!isAllowed(actor, { ...question, action: 'read' })) throw notFound();
  throw forbidden(question.detail);
}
