import type { AppAbility } from '@shared/policy/ability.ts';

/** Parts of the application that only some may enter. The server decides again at each request. */
export type Area =
  | 'runs'
  | 'bring-in'
  | 'sensors'
  | 'recordings'
  | 'bench'
  | 'reviews'
  | 'passes'
  | 'collections'
  | 'people'
  | 'labs'
  | 'audit';

const canEnter: Readonly<Record<Area, (ability: AppAbility) => boolean>> = {
  runs: (ability) => ability.can('read', 'Run'),
  'bring-in': (ability) => ability.can('create', 'Upload'),
  sensors: (ability) => ability.can('read', 'Sensor'),
  // A labeler sees the recordings of the own passes.
  recordings: (ability) => ability.can('read', 'Recording') || ability.can('update', 'Pass'),
  bench: (ability) => ability.can('update', 'Pass') || ability.can('read', 'Recording'),
  reviews: (ability) => ability.can('decide', 'Recording'),
  passes: (ability) => ability.can('create', 'Pass'),
  collections: (ability) => ability.can('read', 'Collection'),
  people: (ability) => ability.can('manage', 'Person'),
  labs: (ability) => ability.can('manage', 'Lab'),
  audit: (ability) => ability.can('read', 'Audit'),
};

export function mayEnter(area: Area, ability: AppAbility): boolean {
  return canEnter[area](ability);
}

export interface NavigationEntry {
  label: string;
  to: string;
  /** Open to everybody who is signed in (`person`), to everybody at all (`anyone`), or to those who may enter. */
  access: Area | 'person' | 'anyone';
}

/** The top line, in the order of the work: bring in, measure, mark, guard, release; then the house itself. */
export const navigation: readonly NavigationEntry[] = [
  { label: 'Home', to: '/', access: 'person' },
  { label: 'Runs', to: '/runs', access: 'runs' },
  { label: 'Bring in', to: '/bring-in', access: 'bring-in' },
  { label: 'Sensors', to: '/sensors', access: 'sensors' },
  { label: 'Review desk', to: '/reviews', access: 'reviews' },
  { label: 'Passes', to: '/passes', access: 'passes' },
  { label: 'Collections', to: '/collections', access: 'collections' },
  { label: 'Releases', to: '/releases', access: 'anyone' },
  { label: 'People', to: '/people', access: 'people' },
  { label: 'Labs', to: '/labs', access: 'labs' },
  { label: 'Audit', to: '/audit', access: 'audit' },
];

export function entriesFor(ability: AppAbility, isSignedIn: boolean): NavigationEntry[] {
  return navigation.filter(({ access }) => {
    if (access === 'anyone') return true;
    if (access === 'person') return isSignedIn;
    return isSignedIn && mayEnter(access, ability);
  });
}
