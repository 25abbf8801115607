import { z } from 'zod';
import { idSchema, instantSchema } from './ids.ts';
import { pageSchema, pageQuerySchema } from './page.ts';

export const serviceRoleSchema = z.enum(['labeler', 'curator', 'administrator']);
export type ServiceRole = z.infer<typeof serviceRoleSchema>;
export const labRoleSchema = z.enum(['contributor', 'reviewer']);
export type LabRole = z.infer<typeof labRoleSchema>;

export const membershipSchema = z.object({ labId: idSchema, role: labRoleSchema });
export type Membership = z.infer<typeof membershipSchema>;
export const namedMembershipSchema = membershipSchema.extend({ labName: z.string() });

export const emailSchema = z.email('is not an e-mail address').trim().toLowerCase().max(254);
export const personNameSchema = z.string().trim().min(1, 'is needed').max(120);
export const passwordSchema = z
  .string()
  .min(12, 'needs at least 12 characters')
  .max(256, 'may have at most 256 characters');

export const personSchema = z.object({
  id: idSchema,
  email: z.string(),
  name: z.string(),
  roles: z.array(serviceRoleSchema),
  memberships: z.array(namedMembershipSchema),
  disabled: z.boolean(),
  createdAt: instantSchema,
  lastSeenAt: instantSchema.nullable(),
});
export type Person = z.infer<typeof personSchema>;

export const listPeopleQuerySchema = pageQuerySchema.extend({ q: z.string().trim().max(100).optional() });
export const peoplePageSchema = pageSchema(personSchema);

/** Roles replace what was there; the last enabled administrator can neither be disabled nor lose the role. */
export const updatePersonSchema = z.object({
  name: personNameSchema.optional(),
  roles: z.array(serviceRoleSchema).optional(),
  memberships: z.array(membershipSchema).optional(),
  disabled: z.boolean().optional(),
});
export type UpdatePerson = z.infer<typeof updatePersonSchema>;

/** Who may be chosen, as a labeler or as a reviewer: names only. */
export const personChoiceSchema = z.object({ id: idSchema, name: z.string() });
export const personChoicesSchema = z.object({ items: z.array(personChoiceSchema) });

export const createInvitationSchema = z.object({
  email: emailSchema,
  roles: z.array(serviceRoleSchema).default([]),
  memberships: z.array(membershipSchema).default([]),
});
export type CreateInvitation = z.infer<typeof createInvitationSchema>;
export const createdInvitationSchema = z.object({ id: idSchema, link: z.url(), expiresAt: instantSchema });
export const invitationSchema = z.object({
  id: idSchema,
  email: z.string(),
  roles: z.array(serviceRoleSchema),
  memberships: z.array(namedMembershipSchema),
  expiresAt: instantSchema,
});
export const invitationsSchema = z.object({ items: z.array(invitationSchema) });
export const invitationTokenParamsSchema = z.object({ token: z.string().min(20).max(200) });
export const openInvitationSchema = z.object({ email: z.string(), expiresAt: instantSchema });
export const acceptInvitationSchema = z.object({ name: personNameSchema, password: passwordSchema });

/** The one-time set-up link of the first administrator. */
export const setupSchema = z.object({
  token: z.string().min(20).max(200),
  name: personNameSchema,
  email: emailSchema,
  password: passwordSchema,
});
