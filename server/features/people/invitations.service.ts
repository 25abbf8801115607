import type { z } from 'zod';
import type {
  CreateInvitation,
  createdInvitationSchema,
  invitationsSchema,
} from '../../../shared/contract/people.ts';
import type { Actor } from '../../../shared/policy/actor.ts';
import { authorize } from '../../authorize/authorize.ts';
import type { Tx } from '../../db/client.ts';
import { write } from '../../db/transaction.ts';
import type { Ground } from '../../ground.ts';
import { notFound } from '../../http/problem.ts';
import { toInstant } from '../../services/clock.ts';
import { createSecret, hashSecret } from '../../services/secret.ts';
import type { AuditService } from '../audit/audit.service.ts';
import type { LabsService } from '../labs/labs.service.ts';
import { requireNewEmail } from './accounts.service.ts';
import {
  deleteInvitation,
  deleteOpenInvitationsOf,
  insertInvitation,
  selectInvitation,
  selectOpenInvitations,
  type InvitationRow,
} from './invitations.queries.ts';

const invitationLifeMs = 72 * 60 * 60_000;

export type InvitationsService = ReturnType<typeof createInvitationsService>;

interface Parts extends Pick<Ground, 'config' | 'db' | 'clock' | 'ids'> {
  audit: AuditService;
  labs: LabsService;
}

/** Invitations from the side of those who invite: the link is told once and kept as a hash. */
export function createInvitationsService({ config, db, clock, ids, audit, labs }: Parts) {
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
      labs.requireKnown(tx, input.memberships);
      deleteOpenInvitationsOf(tx, input.email);
      insertInvitation(tx, row);
      record(tx, actor, { action: 'invitation.created', row });
    });
    const link = `${config.publicUrl}/invitation?token=${token}`;
    return { id: row.id, link, expiresAt: toInstant(row.expiresAtMs) };
  }

  function toRow(
    actor: Actor,
    { email, roles, memberships }: CreateInvitation,
    token: string,
  ): InvitationRow {
    const createdAtMs = clock.nowMs();
    const stamps = { createdAtMs, expiresAtMs: createdAtMs + invitationLifeMs, acceptedAtMs: null };
    const facts = { email, roles, memberships, invitedById: actor.id };
    return { id: ids.next(), tokenHash: hashSecret(token), ...facts, ...stamps };
  }

  function revoke(actor: Actor, invitationId: string): void {
    authorize(actor, { action: 'delete', name: 'Person', row: { id: '' } });
    write(db, (tx) => {
      const row = selectInvitation(tx, invitationId);
      if (row === undefined || row.acceptedAtMs !== null) throw notFound('This invitation');
      deleteInvitation(tx, invitationId);
      record(tx, actor, { action: 'invitation.revoked', row });
    });
  }

  function record(tx: Tx, actor: Actor, { action, row }: { action: string; row: InvitationRow }): void {
    const detail = { email: row.email, roles: row.roles, memberships: row.memberships };
    audit.record(tx, { personId: actor.id, action, subjectType: 'Invitation', subjectId: row.id, detail });
  }

  function toInvitation({ id, email, roles, memberships, expiresAtMs }: InvitationRow) {
    const named = memberships.map((held) => ({ ...held, labName: labs.findName(held.labId) ?? '' }));
    return { id, email, roles, memberships: named, expiresAt: toInstant(expiresAtMs) };
  }

  return { list, create, revoke };
}
