import { saveCollectionSchema } from '../../../shared/contract/collections.ts';
import type { Deps } from '../../deps.ts';
import type { DemoActors } from './seed-people.ts';
import type { DemoRecordingIds } from './seed-recordings.ts';

const ice = saveCollectionSchema.parse({
  title: 'Sounds of dendritic ice',
  slug: 'dendritic-ice',
  description:
    'Droplets of water that freeze on a cold stage, recorded in air up to 85 kHz, with the bursts of dendritic growth marked by people. Controls without a droplet and runs with a smooth front are part of it.',
  publisher: 'Northlight Solidification Lab',
  contactEmail: 'data@northlight.example',
  creators: [
    { name: 'Tomasz Brandvold', role: 'experiment' },
    { name: 'Anselm Varga', role: 'curation' },
  ],
});
const metal = saveCollectionSchema.parse({
  title: 'Castings and welds',
  slug: 'castings-and-welds',
  description:
    'Contact recordings of metal that solidifies, up to 400 kHz, with probable hot cracks and twins marked.',
  publisher: 'Brineworks Casting Institute',
  contactEmail: 'data@brineworks.example',
  creators: [{ name: 'Leocadia Finnigan', role: 'experiment' }],
});

/** One collection with a published release, one whose gates are still open. */
export async function seedReleases(
  deps: Deps,
  people: DemoActors,
  recordingIds: DemoRecordingIds,
  untilIdle: () => Promise<void>,
): Promise<void> {
  const { collections, releases } = deps.services;
  const curator = people.actor('curator');
  const idsOf = (keys: string[]) => keys.map((key) => recordingIds.get(key) ?? '');
  const first = collections.create(curator, ice);
  const members = ['stage-dendritic-a', 'stage-dendritic-b', 'stage-planar', 'stage-control'];
  collections.addItems(curator, first.id, { recordingIds: idsOf(members) });
  const release = await releases.create(curator, first.id, {
    version: '1.0.0',
    licence: 'CC-BY-4.0',
    notes: 'The first release: two droplets with dendritic growth, one smooth front, one control.',
  });
  await untilIdle();
  releases.publish(people.actor('curator2'), release.id);
  const second = collections.create(people.actor('curator2'), metal);
  collections.addItems(people.actor('curator2'), second.id, { recordingIds: idsOf(['casting-a', 'weld']) });
}
