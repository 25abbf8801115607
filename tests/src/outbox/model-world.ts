import type { MarkPlace } from '@/composables/outbox/outbox-entry.ts';
import { createFakeServer } from './fake-server.ts';
import { createFlakyNetwork, createLateChannel, createLocks, createSlowStorage } from './flaky-browser.ts';
import { openWindow } from './model-window.ts';
import type { ModelWindow } from './model-window.ts';
import { createOracle, startOf } from './oracle.ts';
import { place as annsPlace } from './outbox-fixtures.ts';
import { createRandom } from './random.ts';
import { createVirtualTime, settled } from './virtual-time.ts';

export const ann: MarkPlace = annsPlace;
export const bob: MarkPlace = { ...annsPlace, personId: 'bob', passId: 'q' };

/** One browser that two people use, another machine, a server, and what lies between. */
export function createWorld(seed: number) {
  const random = createRandom(seed);
  const time = createVirtualTime();
  const server = createFakeServer();
  const lockFor = createLocks();
  let ids = 0;
  return {
    seed,
    random,
    time,
    server,
    network: createFlakyNetwork(time, random, server),
    storage: createSlowStorage(time, random),
    channelFor: createLateChannel(time, random),
    lockFor,
    oracle: createOracle(server),
    newId: () => `id-${String(++ids).padStart(4, '0')}`,
    windows: [] as ModelWindow[],
    faults: [] as string[],
    log: [] as string[],
    starts: { next: 1 },
    words: { next: 1 },
  };
}

export type World = ReturnType<typeof createWorld>;

export function open(world: World, place: MarkPlace): ModelWindow {
  const window = openWindow(world, place);
  world.windows.push(window);
  return window;
}

export function close(world: World, window: ModelWindow): void {
  window.end();
  world.windows.splice(world.windows.indexOf(window), 1);
}

export function signIn(world: World, personId: string | null): void {
  world.server.session.personId = personId;
  for (const window of world.windows) if (window.place.personId === personId) window.outbox.retry();
}

/** The connection is back, the server stands, this person is signed in: everything is sent that can be. */
export async function heal(world: World, place: MarkPlace): Promise<void> {
  const { network, windows } = world;
  Object.assign(network.state, { isOffline: false, isDown: false, trouble: 0 });
  for (const window of [...windows]) if (window.place !== place) close(world, window);
  if (!windows.some((window) => window.place === place)) open(world, place);
  signIn(world, place.personId);
  for (const window of windows) if (window.place === place) window.outbox.retry();
  await runUntilIdle(world);
}

export async function runUntilIdle(world: World): Promise<void> {
  await settled();
  for (let steps = 0; await world.time.step(); steps++)
    if (steps > 20_000) throw new Error('It never comes to rest.');
}

/** Somebody decides on everything that is to be decided on. */
export async function decideAll(world: World, place: MarkPlace): Promise<void> {
  for (let rounds = 0; rounds < 20; rounds++) {
    const window = world.windows.find((one) => one.place === place && one.isReady());
    const conflicts = window?.outbox.entries().filter(({ state }) => state === 'conflict') ?? [];
    if (!window || conflicts.length === 0) return;
    for (const { id } of conflicts) decide(world, window, id);
    await runUntilIdle(world);
  }
  throw new Error('Deciding never comes to an end.');
}

export function decide(world: World, window: ModelWindow, id: string): void {
  const entry = window.outbox.entries().find((one) => one.id === id);
  if (!entry || entry.state === 'waiting') return;
  const start = startOf(entry);
  const story = world.oracle.stories.get(start);
  const choice = world.random.chance(0.7) ? 'mine' : 'theirs';
  const isAloneInMine = entry.state === 'conflict' && entry.theirs !== null && !story?.wasTouchedElsewhere;
  if (story && !(choice === 'mine' && isAloneInMine))
    Object.assign(story, { isOpen: true, wasDecided: true });
  world.log.push(`decide ${start} ${entry.state} ${choice}`);
  void window.outbox.decide(id, choice);
}
