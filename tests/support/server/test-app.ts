import type { Express } from 'express';
import supertest from 'supertest';
import type TestAgent from 'supertest/lib/agent.js';
import type { Actor } from '../../../shared/policy/actor.ts';
import { allJobs } from '../../../server/all-jobs.ts';
import { createApp } from '../../../server/app.ts';
import { createDeps, type Deps } from '../../../server/deps.ts';
import { createJobRunner } from '../../../server/jobs/runner.ts';
import { createSecret } from '../../../server/services/secret.ts';
import type { FakeClock } from './fake-clock.ts';
import { seedActors, type ActorName, type PersonName, type SeededActors } from './seed-actors.ts';
import { createTestGround } from './test-ground.ts';

export interface TestApp extends SeededActors {
  deps: Deps;
  clock: FakeClock;
  http: Express;
  /** Requests as that actor would send them from our own pages. */
  as(name: ActorName): TestAgent;
  actor(name: PersonName): Actor;
  /** Runs every due job, and tells how many there were. */
  runJobs(): Promise<number>;
  close(): Promise<void>;
}

/** The whole server without a port: `app.as('curator').get('/api/runs')`. Close it after the test. */
export function createTestApp(settings: Record<string, string> = {}): TestApp {
  const ground = createTestGround(settings);
  const deps = createDeps(ground);
  const http = createApp(deps);
  const seeded = seedActors(deps);
  return {
    ...seeded,
    deps,
    clock: ground.clock,
    http,
    as: (name) => agentFor({ http, deps, seeded }, name),
    actor: (name) => requireActor(deps, seeded.personIds[name]),
    runJobs: () => runnerOf(deps).runUntilIdle(),
    close: () => ground.close(),
  };
}

interface Parts {
  http: Express;
  deps: Deps;
  seeded: SeededActors;
}

function agentFor({ http, deps, seeded }: Parts, name: ActorName): TestAgent {
  const agent = supertest.agent(http);
  if (name === 'foreignToken') return agent.set('Authorization', `Bearer ${createSecret('rcl_')}`);
  agent.set('Origin', deps.config.publicUrl);
  if (name === 'anonymous') return agent;
  return agent.set('Cookie', `${deps.cookie.name}=${seeded.sessionTokens[name]}`);
}

function requireActor(deps: Deps, personId: string): Actor {
  const actor = deps.services.actors.find(personId);
  if (actor === null) throw new RangeError('This person is disabled.');
  return actor;
}

function runnerOf(deps: Deps) {
  return createJobRunner({
    queue: deps.jobs,
    handlers: allJobs(deps),
    log: deps.log,
    lanes: { compute: 1, light: 1 },
  });
}
