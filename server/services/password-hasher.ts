import { hash, verify } from '@node-rs/argon2';
import { createGate } from './gate.ts';

export interface PasswordHasher {
  hash(password: string): Promise<string>;
  verify(passwordHash: string, password: string): Promise<boolean>;
}

const parameters = { memoryCost: 65_536, timeCost: 3, parallelism: 1 };
const hashesAtOnce = 2;

/** argon2id (the default of the package) with 64 MiB and three passes. Two at once: hashing shares the threads that serve files. */
export function createPasswordHasher(): PasswordHasher {
  const gate = createGate(hashesAtOnce);
  return {
    hash: (password) => gate(() => hash(password, parameters)),
    verify: (passwordHash, password) => gate(() => verify(passwordHash, password)),
  };
}
