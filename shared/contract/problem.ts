import { z } from 'zod';

/** Every answer that is not a success has one of these codes; nothing else decides its status and title. */
export const problemCodes = {
  'malformed-request': { status: 400, title: 'The request could not be read' },
  'sign-in-required': { status: 401, title: 'Sign in first' },
  'sign-in-refused': { status: 401, title: 'E-mail and password do not match' },
  forbidden: { status: 403, title: 'Not allowed' },
  'cross-site': { status: 403, title: 'Sent from another site' },
  'not-found': { status: 404, title: 'Not found' },
  'method-not-allowed': { status: 405, title: 'Method not allowed here' },
  conflict: { status: 409, title: 'This does not fit the present state' },
  'already-exists': { status: 409, title: 'It exists already' },
  gone: { status: 410, title: 'No longer there' },
  stale: { status: 412, title: 'It has changed in the meantime' },
  'too-large': { status: 413, title: 'Too large' },
  'unsupported-type': { status: 415, title: 'This content type is not taken here' },
  'range-not-satisfiable': { status: 416, title: 'This range does not exist' },
  'invalid-input': { status: 422, title: 'Something in the input is not right' },
  'file-refused': { status: 422, title: 'The file was refused' },
  'checksum-mismatch': { status: 422, title: 'The bytes are not the ones announced' },
  'revision-required': { status: 428, title: 'Say which revision is changed' },
  'too-many-requests': { status: 429, title: 'Too many requests' },
  internal: { status: 500, title: 'Something went wrong on the server' },
  'not-ready': { status: 503, title: 'Not ready yet' },
  'storage-full': { status: 507, title: 'No room left on the server' },
} as const satisfies Record<string, { status: number; title: string }>;

export type ProblemCode = keyof typeof problemCodes;

export const problemFieldSchema = z.object({
  /** Place in the input, as in `conditions.coolingRateKPerS`; empty for the input as a whole. */
  path: z.string(),
  message: z.string(),
});
export type ProblemField = z.infer<typeof problemFieldSchema>;

/** RFC 9457, with a code for programs, a request id for the log, and the fields that have to be corrected. */
export const problemSchema = z.object({
  type: z.string(),
  title: z.string(),
  status: z.number().int(),
  detail: z.string(),
  code: z.string(),
  requestId: z.string(),
  fields: z.array(problemFieldSchema),
  /** With 412: the representation as it is now, so that a person can compare. */
  current: z.unknown().optional(),
});
export type Problem = z.infer<typeof problemSchema>;
