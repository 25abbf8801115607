import { fieldsOf } from '@/composables/bench/mark.ts';
import type { MarkFields } from '@/composables/bench/mark.ts';
import { ann, bob, close, decide, open, signIn } from './model-world.ts';
import type { World } from './model-world.ts';
import type { ModelWindow } from './model-window.ts';
import { crack } from './outbox-fixtures.ts';

type Act = (world: World) => void;

const word = ({ words }: World) => `w${words.next++}`;
const atWork = ({ windows, random }: World) => random.pick(windows.filter((window) => window.isAtWork()));

function pickMark({ random }: World, window: ModelWindow) {
  return random.pick([...window.view]);
}

function setMark(world: World): void {
  const window = atWork(world);
  if (!window) return;
  const startSample = world.starts.next++ * 100;
  const mark: MarkFields = { ...crack, startSample, endSample: startSample + 50, note: word(world) };
  world.log.push(`${window.place.personId} sets ${startSample} "${mark.note}"`);
  window.step(world.newId(), mark);
}

function changeMark(world: World): void {
  const window = atWork(world);
  const [key, mark] = (window && pickMark(world, window)) ?? [];
  if (!window || key === undefined || !mark) return;
  const value = world.random.chance(0.1) ? `${word(world)} ` : word(world);
  const changed = world.random.chance(0.5) ? { note: value } : { classKey: value.trim() };
  world.log.push(`${window.place.personId} changes ${mark.startSample} ${JSON.stringify(changed)}`);
  window.step(key, { ...fieldsOf(mark), ...changed });
}

function deleteMark(world: World): void {
  const window = atWork(world);
  const [key, mark] = (window && pickMark(world, window)) ?? [];
  if (!window || key === undefined || !mark) return;
  world.log.push(`${window.place.personId} deletes ${mark.startSample}`);
  window.step(key, null);
}

function undo(world: World): void {
  const window = atWork(world);
  world.log.push('undo');
  window?.undo();
}

function reload(world: World): void {
  const window = world.random.pick(world.windows);
  if (!window) return;
  world.log.push('reload');
  close(world, window);
  open(world, window.place);
}

function closeWindow(world: World): void {
  const window = world.random.pick(world.windows);
  if (!window) return;
  world.log.push('close');
  close(world, window);
}

function openAnother(world: World): void {
  if (world.windows.length >= 4) return;
  world.log.push('open');
  open(world, world.random.chance(0.85) ? ann : bob);
}

function changeConnection({ network, log }: World): void {
  network.state.isOffline = !network.state.isOffline;
  log.push(`offline ${network.state.isOffline}`);
}

function restartServer({ network, log, time, random }: World): void {
  network.state.isDown = true;
  log.push('server down');
  time.after(random.below(4000), () => (network.state.isDown = false));
}

function endSession({ server, log }: World): void {
  server.session.personId = null;
  log.push('session ended');
}

function signInSomebody(world: World): void {
  const personId = world.random.chance(0.75) ? 'ann' : 'bob';
  world.log.push(`${personId} signs in`);
  signIn(world, personId);
}

function changeElsewhere({ server, random, oracle, log, words }: World): void {
  const row = random.pick(server.live());
  const story = row && oracle.stories.get(row.event.startSample);
  if (!row || !story || server.finishedPasses.has(row.event.passId)) return;
  const fields = fieldsOf(row.event);
  story.wasTouchedElsewhere = true;
  const kind = random.next();
  log.push(`elsewhere ${kind < 0.7 ? 'confidence' : kind < 0.85 ? 'note' : 'delete'} ${fields.startSample}`);
  if (kind < 0.7) {
    story.confidenceElsewhere = fields.confidence === 'sure' ? 'probable' : 'sure';
    server.change(row, { ...fields, confidence: story.confidenceElsewhere }, 'elsewhere');
    return;
  }
  story.isOpen = true;
  if (kind < 0.85) server.change(row, { ...fields, note: `e${words.next++}` }, 'elsewhere');
  else server.remove(row, 'elsewhere');
}

function decideOne(world: World): void {
  const window = world.random.pick(world.windows.filter((one) => one.isReady()));
  const entry = window?.outbox.entries().find(({ state }) => state === 'conflict');
  if (window && entry) decide(world, window, entry.id);
}

function finishPass({ server, random, log }: World): void {
  if (!random.chance(0.1)) return;
  server.finishedPasses.add('p');
  log.push('pass finished');
}

function tryNow({ windows, random }: World): void {
  random.pick(windows)?.outbox.retry();
}

const ACTS: readonly (readonly [number, Act])[] = [
  [22, setMark],
  [25, changeMark],
  [8, deleteMark],
  [9, undo],
  [6, reload],
  [2, closeWindow],
  [4, openAnother],
  [6, changeConnection],
  [4, restartServer],
  [3, endSession],
  [6, signInSomebody],
  [7, changeElsewhere],
  [2, decideOne],
  [2, finishPass],
  [2, tryNow],
];
const TOTAL = ACTS.reduce((sum, [weight]) => sum + weight, 0);

export function actOnce(world: World): void {
  let left = world.random.below(TOTAL);
  for (const [weight, act] of ACTS) {
    if (left < weight) return act(world);
    left -= weight;
  }
}
