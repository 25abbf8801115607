import type { Response } from 'express';
import { createAuditService, type AuditService } from './features/audit/audit.service.ts';
import { createHealthService, type HealthService } from './features/health/health.service.ts';
import { createLabsService, type LabsService } from './features/labs/labs.service.ts';
import { createAcceptanceService, type AcceptanceService } from './features/people/acceptance.service.ts';
import { createAccountsService, type AccountsService } from './features/people/accounts.service.ts';
import { createActorsService, type ActorsService } from './features/people/actors.service.ts';
import { createInvitationsService, type InvitationsService } from './features/people/invitations.service.ts';
import { createPeopleService, type PeopleService } from './features/people/people.service.ts';
import { createSetupService, type SetupService } from './features/people/setup.service.ts';
import { createIdentitiesService, type IdentitiesService } from './features/sessions/identities.service.ts';
import { createPasswordService, type PasswordService } from './features/sessions/password.service.ts';
import { createSessionsService, type SessionsService } from './features/sessions/sessions.service.ts';
import { tokenLifeMs } from './features/sessions/session-token.ts';
import { createTokensService, type TokensService } from './features/sessions/tokens.service.ts';
import type { Ground } from './ground.ts';
import { createSessionCookie, type SessionCookie } from './http/session-cookie.ts';
import { createBesideServices, type BesideServices } from './beside-services.ts';
import { createMarkingServices, type MarkingServices } from './marking-services.ts';
import { createRecordingServices, type RecordingServices } from './recording-services.ts';

export interface Services extends RecordingServices, MarkingServices, BesideServices {
  audit: AuditService;
  labs: LabsService;
  actors: ActorsService;
  sessions: SessionsService;
  identities: IdentitiesService;
  tokens: TokensService;
  password: PasswordService;
  people: PeopleService;
  accounts: AccountsService;
  invitations: InvitationsService;
  acceptance: AcceptanceService;
  setup: SetupService;
  health: HealthService;
}

/** What routes and jobs get: the ground, every feature's service, and what belongs to the one HTTP server. */
export interface Deps extends Ground {
  services: Services;
  cookie: SessionCookie;
  /** Answers that never end by themselves; a stop ends them. */
  openStreams: Set<Response>;
}

/** The composition root: each service is handed what it needs, in the order in which they build on each other. */
export function createDeps(ground: Ground): Deps {
  return {
    ...ground,
    services: createServices(ground),
    cookie: createSessionCookie(ground.config.secure, tokenLifeMs),
    openStreams: new Set(),
  };
}

function createServices(ground: Ground): Services {
  const audit = createAuditService(ground);
  const labs = createLabsService({ ...ground, audit });
  const actors = createActorsService(ground);
  const sessions = createSessionsService({ ...ground, audit, actors });
  const identities = createIdentitiesService({ ...ground, actors, sessions });
  const tokens = createTokensService({ ...ground, audit, actors });
  const people = createPeopleService({ ...ground, audit, labs, sessions });
  const invitations = createInvitationsService({ ...ground, audit, labs });
  const accounts = createAccountsService(ground);
  const password = createPasswordService({ ...ground, audit, actors, accounts });
  const acceptance = createAcceptanceService({ ...ground, audit, accounts });
  const setup = createSetupService({ ...ground, audit, accounts });
  const health = createHealthService(ground);
  const ofRecordings = createRecordingServices(ground, audit);
  const ofMarking = createMarkingServices(ground, audit, ofRecordings);
  return {
    audit,
    labs,
    actors,
    sessions,
    identities,
    tokens,
    password,
    people,
    accounts,
    invitations,
    acceptance,
    setup,
    health,
    ...ofRecordings,
    ...ofMarking,
    ...createBesideServices(ground, audit, { ...ofRecordings, ...ofMarking }),
  };
}
