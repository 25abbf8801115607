import { describe, expect, test } from 'vitest';
import { createGate } from '../../../server/services/gate.ts';
import { createPasswordHasher } from '../../../server/services/password-hasher.ts';

describe('password hashes', () => {
  test('are argon2id with 64 MiB, three passes, one lane, and a salt of their own', async () => {
    const hasher = createPasswordHasher();
    const first = await hasher.hash('seven quiet lanterns drift');
    const second = await hasher.hash('seven quiet lanterns drift');
    expect(first).toMatch(/^\$argon2id\$v=19\$m=65536,t=3,p=1\$/);
    expect(first).not.toBe(second);
  });

  test('are true for the exact password only: blanks and case count', async () => {
    const hasher = createPasswordHasher();
    const hash = await hasher.hash(' Seven quiet lanterns ');
    expect(await hasher.verify(hash, ' Seven quiet lanterns ')).toBe(true);
    expect(await hasher.verify(hash, 'Seven quiet lanterns')).toBe(false);
    expect(await hasher.verify(hash, ' seven quiet lanterns ')).toBe(false);
  });
});

describe('the gate', () => {
  test('lets as many run at once as it says, and the others in turn', async () => {
    const gate = createGate(2);
    const order: number[] = [];
    let running = 0;
    let most = 0;
    const task = (number: number) => async () => {
      running += 1;
      most = Math.max(most, running);
      order.push(number);
      await new Promise((resolve) => setTimeout(resolve, 5));
      running -= 1;
    };
    await Promise.all([1, 2, 3, 4, 5].map((number) => gate(task(number))));
    expect(most).toBe(2);
    expect(order).toEqual([1, 2, 3, 4, 5]);
  });

  test('a task that fails makes room', async () => {
    const gate = createGate(1);
    await expect(gate(() => Promise.reject(new Error('no')))).rejects.toThrow('no');
    expect(await gate(async () => 'yes')).toBe('yes');
  });
});
