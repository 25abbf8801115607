import { actorNames, type ActorName } from '../server/seed-actors.ts';
import type { TestApp } from '../server/test-app.ts';

export interface CellRequest {
  /** With ids filled in. */
  path: string;
  body?: object;
  headers?: Record<string, string>;
}

/** One route in one state of its object: what each actor gets. */
export interface MatrixRow {
  /** Method and path as registered: `PATCH /api/labs/:id`. */
  route: string;
  /** Which object, where one route has several rows: `a held recording of the own lab`. */
  state?: string;
  /** Makes the object and the request; called for each actor, and undone afterwards. */
  prepare: (app: TestApp, actor: ActorName) => CellRequest | Promise<CellRequest>;
  expected: Record<ActorName, number>;
  /** The answer does not end by itself. */
  endless?: boolean;
}

type Exceptions = Partial<Record<ActorName, number>>;

/** For routes that need a person: nobody, the disabled and the bearer of an unknown token get 401. */
export function signedIn(status: number, exceptions: Exceptions = {}): Record<ActorName, number> {
  return { ...forAll(status), anonymous: 401, disabled: 401, foreignToken: 401, ...exceptions };
}

/** For public routes; a token that is not valid is refused even there. */
export function everybody(status: number, exceptions: Exceptions = {}): Record<ActorName, number> {
  return { ...forAll(status), foreignToken: 401, ...exceptions };
}

function forAll(status: number): Record<ActorName, number> {
  return Object.fromEntries(actorNames.map((name) => [name, status])) as Record<ActorName, number>;
}
