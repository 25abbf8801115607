import type { EventClass } from '@shared/contract/schemes.ts';

export interface ClassChoice extends EventClass {
  /** Position on the keyboard, as in `KeyboardEvent.code`; `null` where the keys of one hand are used up. */
  code: string | null;
  /** What stands on that key of the most common layout. */
  keyName: string;
}

/** For the left hand, the strongest fingers first: home row, row above, row below. The right hand has the actions. */
const POSITIONS = [
  'KeyF',
  'KeyD',
  'KeyS',
  'KeyA',
  'KeyG',
  'KeyR',
  'KeyE',
  'KeyW',
  'KeyQ',
  'KeyT',
  'KeyV',
  'KeyC',
  'KeyX',
  'KeyZ',
  'KeyB',
] as const;

export function withKeys(classes: readonly EventClass[]): ClassChoice[] {
  return classes.map((item, index) => {
    const code = POSITIONS[index] ?? null;
    return { ...item, code, keyName: code?.slice(3) ?? '' };
  });
}
