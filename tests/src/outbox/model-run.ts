import { actOnce } from './model-acts.ts';
import { ann, bob, createWorld, decideAll, heal, open, signIn } from './model-world.ts';
import { startOf } from './oracle.ts';
import type { World } from './model-world.ts';
import type { ModelWindow } from './model-window.ts';

const MOST_ACTS = 40;

async function live(world: World): Promise<void> {
  signIn(world, 'ann');
  open(world, ann);
  const acts = 5 + world.random.below(MOST_ACTS);
  for (let act = 0; act < acts && world.faults.length === 0; act++) {
    actOnce(world);
    for (let steps = world.random.below(12); steps > 0; steps--) await world.time.step();
    if (world.random.chance(0.2)) await findHidden(world);
  }
}

async function findHidden(world: World): Promise<void> {
  world.faults.push(...world.oracle.findHidden(await world.storage.all()));
}

/** Whoever still looks at the bench sees what the server has, as far as nobody changed it on another machine. */
function findWrongViews(world: World, window: ModelWindow): string[] {
  const { oracle, server } = world;
  if (window.outbox.entries().length > 0) return [];
  const rows = server.live(window.place.passId).map(({ event }) => event);
  const known = rows.filter(({ startSample }) => !oracle.stories.get(startSample)?.wasTouchedElsewhere);
  const shown = [...window.view.values()].filter(
    ({ startSample }) => !oracle.stories.get(startSample)?.wasTouchedElsewhere,
  );
  const say = (marks: readonly { startSample: number; note: string; classKey: string }[]) =>
    marks
      .map((mark) => `${mark.startSample} ${mark.classKey} ${mark.note.trim()}`)
      .sort()
      .join(', ');
  return say(known) === say(shown) ? [] : [`a window shows [${say(shown)}], the server has [${say(known)}]`];
}

/** One life of a browser, by its seed; what went wrong in it, with what was done. */
export async function faultsOf(seed: number): Promise<string> {
  const world = createWorld(seed);
  await live(world);
  for (const place of [ann, bob]) {
    await heal(world, place);
    await decideAll(world, place);
    for (const window of world.windows)
      if (window.place === place) world.faults.push(...findWrongViews(world, window));
  }
  const left = await world.storage.all();
  world.faults.push(...world.oracle.findHidden(left), ...world.oracle.findFaults(left));
  world.faults.push(
    ...left
      .filter(({ state }) => state !== 'refused')
      .map((entry) => `${startOf(entry)} is stuck: ${JSON.stringify(entry)}`),
  );
  return world.faults.length === 0
    ? ''
    : `seed ${seed}: ${[...new Set(world.faults)].join('; ')}\n${world.log.join('\n')}`;
}
