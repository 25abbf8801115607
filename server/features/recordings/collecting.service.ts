import type { AddItems } from '../../../shared/contract/collections.ts';
import type { Licence } from '../../../shared/contract/licence.ts';
import type { RecordingListItem } from '../../../shared/contract/recordings.ts';
import type { Actor } from '../../../shared/policy/actor.ts';
import { visibleRecordings } from '../../authorize/visible-recordings.ts';
import { selectWithheld } from '../../authorize/withheld.ts';
import type { Ground } from '../../ground.ts';
import { toListItem } from './recordings.map.ts';
import { selectRecordings, type RecordingFilters } from './recordings.queries.ts';

const mostAtOnce = 5000;

type Collectable = RecordingListItem & { licence: Licence; isWithheld: boolean };

export type CollectingService = ReturnType<typeof createCollectingService>;

/** Recordings that may go into a collection: shared ones that this person may see. */
export function createCollectingService({ db }: Pick<Ground, 'db'>) {
  function select(actor: Actor, filters: Omit<RecordingFilters, 'askedById'>) {
    const shared = { ...filters, askedById: actor.id, sharing: 'shared' as const };
    return selectRecordings(db, {
      filters: shared,
      visible: visibleRecordings(actor),
      after: null,
      limit: mostAtOnce,
    });
  }

  function sharedByIds(actor: Actor, ids: readonly string[]): Collectable[] {
    if (ids.length === 0) return [];
    const withheld = selectWithheld(db, actor, ids);
    return select(actor, { ids }).map((view) => {
      const isWithheld = withheld.get(view.recording.id)?.blind ?? false;
      return { ...toListItem(view, isWithheld), licence: view.recording.licence, isWithheld };
    });
  }

  function sharedIdsByFilter(actor: Actor, filter: NonNullable<AddItems['filter']>): string[] {
    return select(actor, { ...filter, processing: 'measured' }).map((view) => view.recording.id);
  }

  return { sharedByIds, sharedIdsByFilter };
}
