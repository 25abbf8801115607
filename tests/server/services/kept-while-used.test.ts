import { describe, expect, it } from 'vitest';
import { keptWhileUsed } from '../../../server/services/kept-while-used.ts';

describe('answers that are kept while they are used', () => {
  it('are made once, also for those who ask meanwhile', async () => {
    let made = 0;
    const kept = keptWhileUsed<number>(2);
    const make = async () => ++made;
    expect(await Promise.all([kept('a', make), kept('a', make)])).toEqual([1, 1]);
    expect(await kept('a', make)).toBe(1);
  });

  it('go when others were used later, and when making them failed', async () => {
    let made = 0;
    const kept = keptWhileUsed<number>(2);
    const make = async () => ++made;
    for (const key of ['a', 'b', 'a', 'c']) await kept(key, make);
    expect(await kept('a', make)).toBe(1);
    expect(await kept('b', make)).toBe(4);
    await expect(kept('d', () => Promise.reject(new Error('not there')))).rejects.toThrow('not there');
    expect(await kept('d', make)).toBe(5);
  });
});
