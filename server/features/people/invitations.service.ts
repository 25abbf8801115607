import type { z } from 'zod';
import type {
  acceptInvitationSchema,
  CreateInvitation,
  createdInvitationSchema,
  invitationsSchema,
  openInvitationSchema,
  setupSchema,
} from '../../../shared/contract/people.ts';
import type { Actor } from '../../../shared/policy/actor.ts';
import { authorize } from '../../authorize/authorize.ts';
import type { Reader, Tx } from '../../db/client.ts';
import { write } from '../../db/transaction.ts';
import type { Ground } from '../../ground.ts';
import { ProblemError, invalidField, notFound } from '../../http/problem.ts';
import { toInstant } from '../../services/clock.ts';
import { createSecret, hashSecret } from '../../services/secret.ts';
import type { AuditService } from '../audit/audit.service.ts';
import type { LabsService } from '../labs/labs.service.ts';
import {
  deleteInvitation,
  deleteOpenInvitationsOf,
  insertInvitation,
  replaceSetupToken,
  selectInvitation,
  selectInvitationByHash,
  selectOpenInvitations,
  selectSetupTokenByHash,
  updateInvitationAccepted,
  updateSetupTokenUsed,
  type InvitationRow,
} from './invitations.queries.ts';
import { requireUncommonPassword } from './password-rules.ts';
import { emailTaken } from './people.service.ts';
import {
  countUsers,
  insertUser,
  replaceMemberships,
  replaceRoles,
  selectUserByEmail,
} from './people.queries.ts';

const hourMs = 60 * 60_000;
const invitationLifeMs = 72 * hourMs;
const setupLifeMs = 24 * hourMs;

export type InvitationsService = ReturnType<typeof createInvitationsService>;
type NewPerson = Pick<CreateInvitation, 'email' | 'roles' | 'memberships'> & {
  name: string;
  passwordHash: string;
};

interface Parts extends Pick<Ground, 'config' | 'db' | 'clock' | 'ids' | 'hasher'> {
  audit: AuditService;
  labs: LabsService;
}

/** One-time links: told once, kept as a hash, good once and not for long. */
export function createInvitationsService({ config, db, clock, ids, hasher, audit, labs }: Parts) {
  function list(actor: Actor): z.input<typeof invitationsSchema> {
    authorize(actor, { action: 'read', name: 'Person', row: { id: '' } });
    return { items: selectOpenInvitations(db, clock.nowMs()).map(toInvitation) };
  }

  function create(actor: Actor, input: CreateInvitation): z.input<typeof createdInvitationSchema> {
    authorize(actor, { action: 'create', name: 'Person', row: { id: '' } });
    const token = createSecret();
    const row = toRow(actor, input, token);
    write(db, (tx) => {
      requireNewEmail(tx, input.email);
      requireKnownLabs(tx, input);
      deleteOpenInvitationsOf(tx, input.email);
      insertInvitation(tx, row);
      const { email, roles, memberships } = input;
      record(tx, {
        personId: actor.id,
        action: 'invitation.created',
        id: row.id,
        detail: { email, roles, memberships },
      });
    });
    return { id: row.id, link: linkTo('invitation', token), expiresAt: toInstant(row.expiresAtMs) };
  }

  function toRow(actor: Actor, input: CreateInvitation, token: string): InvitationRow {
    const now = clock.nowMs();
    return {
      id: ids.next(),
      email: input.email,
      tokenHash: hashSecret(token),
      roles: input.roles,
      memberships: input.memberships,
      invitedById: actor.id,
      createdAtMs: now,
      expiresAtMs: now + invitationLifeMs,
      acceptedAtMs: null,
    };
  }

  function revoke(actor: Actor, invitationId: string): void {
    authorize(actor, { action: 'delete', name: 'Person', row: { id: '' } });
    write(db, (tx) => {
      const found = selectInvitation(tx, invitationId);
      if (found === undefined || found.acceptedAtMs !== null) throw notFound('This invitation');
      deleteInvitation(tx, invitationId);
      record(tx, {
        personId: actor.id,
        action: 'invitation.revoked',
        id: invitationId,
        detail: { email: found.email },
      });
    });
  }

  /** What the holder of the link is shown before accepting. */
  function open(token: string): z.input<typeof openInvitationSchema> {
    const found = requireOpen(db, token);
    return { email: found.email, expiresAt: toInstant(found.expiresAtMs) };
  }

  async function accept(token: string, input: z.output<typeof acceptInvitationSchema>): Promise<string> {
    const { email } = requireOpen(db, token);
    requireUncommonPassword(input.password, { email, name: input.name });
    const passwordHash = await hasher.hash(input.password);
    return write(db, (tx) => {
      const invitation = requireOpen(tx, token);
      if (!updateInvitationAccepted(tx, invitation.id, clock.nowMs())) throw linkUsed();
      const { roles, memberships } = invitation;
      const personId = createPerson(tx, { email, name: input.name, passwordHash, roles, memberships });
      record(tx, { personId, action: 'invitation.accepted', id: invitation.id, detail: { email } });
      return personId;
    });
  }

  function requireOpen(reader: Reader, token: string): InvitationRow {
    const found = selectInvitationByHash(reader, hashSecret(token));
    if (found === undefined) throw notFound('This invitation');
    if (found.acceptedAtMs !== null || found.expiresAtMs <= clock.nowMs()) throw linkUsed();
    return found;
  }

  /** While there is nobody, a new link at each start; it replaces the one before. */
  function createSetupLink(): string | null {
    if (countUsers(db) > 0) return null;
    const token = createSecret();
    const now = clock.nowMs();
    const row = {
      id: ids.next(),
      tokenHash: hashSecret(token),
      createdAtMs: now,
      expiresAtMs: now + setupLifeMs,
    };
    write(db, (tx) => replaceSetupToken(tx, row));
    return linkTo('setup', token);
  }

  async function setUp({ token, name, email, password }: z.output<typeof setupSchema>): Promise<string> {
    requireSetupToken(db, token);
    requireUncommonPassword(password, { email, name });
    const passwordHash = await hasher.hash(password);
    return write(db, (tx) => {
      const id = requireSetupToken(tx, token);
      if (!updateSetupTokenUsed(tx, id, clock.nowMs())) throw linkUsed();
      const personId = createPerson(tx, {
        email,
        name,
        passwordHash,
        roles: ['administrator'],
        memberships: [],
      });
      const subject = { subjectType: 'Person', subjectId: personId };
      audit.record(tx, { personId, action: 'service.set-up', ...subject, detail: { email } });
      return personId;
    });
  }

  function requireSetupToken(reader: Reader, token: string): string {
    const found = selectSetupTokenByHash(reader, hashSecret(token));
    if (found === undefined) throw notFound('This link');
    if (found.usedAtMs !== null || found.expiresAtMs <= clock.nowMs() || countUsers(reader) > 0)
      throw linkUsed();
    return found.id;
  }

  function createPerson(tx: Tx, { email, name, passwordHash, roles, memberships }: NewPerson): string {
    requireNewEmail(tx, email);
    const id = ids.next();
    const createdAtMs = clock.nowMs();
    insertUser(tx, { id, email, name, passwordHash, disabled: false, createdAtMs, lastSeenAtMs: null });
    replaceRoles(tx, id, roles);
    replaceMemberships(tx, id, memberships);
    return id;
  }

  function requireKnownLabs(tx: Tx, { memberships }: CreateInvitation): void {
    const missing = labs.findMissing(
      tx,
      memberships.map(({ labId }) => labId),
    );
    if (missing.length > 0) throw invalidField('memberships', 'names a lab that does not exist');
  }

  function record(
    tx: Tx,
    facts: { personId: string; action: string; id: string; detail: Record<string, unknown> },
  ): void {
    const { personId, action, id, detail } = facts;
    audit.record(tx, { personId, action, subjectType: 'Invitation', subjectId: id, detail });
  }

  function toInvitation(row: InvitationRow) {
    const { id, email, roles, expiresAtMs } = row;
    const memberships = row.memberships.map((held) => ({
      ...held,
      labName: labs.findName(held.labId) ?? '',
    }));
    return { id, email, roles, memberships, expiresAt: toInstant(expiresAtMs) };
  }

  function linkTo(page: 'invitation' | 'setup', token: string): string {
    return `${config.publicUrl}/${page}?token=${token}`;
  }

  return { list, create, revoke, open, accept, createSetupLink, setUp, createPerson };
}

function requireNewEmail(reader: Reader, email: string): void {
  if (selectUserByEmail(reader, email) !== undefined) throw emailTaken(email);
}

function linkUsed(): ProblemError {
  return new ProblemError('gone', 'This link was used already, or its time is over. Ask for a new one.');
}
