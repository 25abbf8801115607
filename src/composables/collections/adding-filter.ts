import type { AddItems } from '@shared/contract/collections.ts';

type Verdict = NonNullable<NonNullable<AddItems['filter']>['ultrasonicVerdict']>;

/** What the fields of the filter hold: an empty text means that they do not narrow. */
export interface AddingFilter {
  q: string;
  labId: string;
  material: string;
  ultrasonicVerdict: Verdict | '';
}

export const emptyAddingFilter: AddingFilter = { q: '', labId: '', material: '', ultrasonicVerdict: '' };

/** The filter as requests take it. */
export function toItemFilter(filter: AddingFilter): NonNullable<AddItems['filter']> {
  const q = filter.q.trim();
  const material = filter.material.trim();
  return {
    ...(q ? { q } : {}),
    ...(filter.labId ? { labId: filter.labId } : {}),
    ...(material ? { material } : {}),
    ...(filter.ultrasonicVerdict ? { ultrasonicVerdict: filter.ultrasonicVerdict } : {}),
  };
}
