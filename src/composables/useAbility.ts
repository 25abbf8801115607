import { may as mayByPolicy } from '@shared/policy/ability.ts';
import type { Action, SubjectFields, SubjectName } from '@shared/policy/subjects.ts';
import { useSessionStore } from '@/stores/session.ts';

/** What the person may do, for showing and hiding; the server decides again at every request. */
export function useAbility() {
  const session = useSessionStore();

  /** Asks about one row: always this one where a row is at hand. */
  function may<Name extends SubjectName>(action: Action, name: Name, row: SubjectFields[Name]): boolean {
    return mayByPolicy(session.ability, action, name, row);
  }

  /** True where there can be rows with which it is allowed: for entries of the navigation, never for a row. */
  function mayEver(action: Action, name: SubjectName): boolean {
    return session.ability.can(action, name);
  }

  return { may, mayEver };
}
