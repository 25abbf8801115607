import { z } from 'zod';
import { idSchema, instantSchema } from './ids.ts';
import { namedMembershipSchema, passwordSchema, serviceRoleSchema } from './people.ts';

export const signInSchema = z.object({
  email: z.string().trim().toLowerCase().min(1, 'is needed').max(254),
  password: z.string().min(1, 'is needed').max(256),
});
export type SignIn = z.infer<typeof signInSchema>;

export const currentUserSchema = z.object({
  id: idSchema,
  email: z.string(),
  name: z.string(),
  roles: z.array(serviceRoleSchema),
  memberships: z.array(namedMembershipSchema),
  /** CASL rules, packed: they decide what the client shows, never what the server allows. */
  rules: z.array(z.array(z.unknown())),
});
export type CurrentUser = z.infer<typeof currentUserSchema>;

export const signedInSchema = z.object({ user: currentUserSchema });
export const currentSessionSchema = z.object({ user: currentUserSchema.nullable() });

export const sessionRowSchema = z.object({
  id: idSchema,
  userAgent: z.string(),
  createdAt: instantSchema,
  lastSeenAt: instantSchema,
  current: z.boolean(),
});
export const sessionsSchema = z.object({ items: z.array(sessionRowSchema) });

export const createTokenSchema = z.object({
  name: z.string().trim().min(1, 'is needed').max(80),
  expiresInDays: z.number().int().min(1).max(365).default(90),
});
export type CreateToken = z.infer<typeof createTokenSchema>;
export const tokenRowSchema = z.object({
  id: idSchema,
  name: z.string(),
  createdAt: instantSchema,
  expiresAt: instantSchema,
  lastUsedAt: instantSchema.nullable(),
});
export const tokensSchema = z.object({ items: z.array(tokenRowSchema) });
/** `token` is told once and kept only as a hash. */
export const createdTokenSchema = tokenRowSchema.extend({ token: z.string() });

export const changePasswordSchema = z.object({
  currentPassword: z.string().min(1, 'is needed').max(256),
  newPassword: passwordSchema,
});
export type ChangePassword = z.infer<typeof changePasswordSchema>;
