import type { z } from 'zod';
import type { ProblemField } from '../../shared/contract/problem.ts';
import { fieldSentence } from '../../shared/lib/field-sentence.ts';
import { ProblemError, notFound } from './problem.ts';

/** Parses a body or a query; what is wrong is told field by field, in words. */
export function validate<Schema extends z.ZodType>(schema: Schema, input: unknown): z.output<Schema> {
  const parsed = schema.safeParse(input, { error: toSentence });
  if (parsed.success) return parsed.data;
  const fields = toFields(parsed.error);
  throw new ProblemError('invalid-input', toDetail(fields), { fields });
}

/** A path that cannot name anything is a missing thing, not a wrong input. */
export function validateParams<Schema extends z.ZodType>(schema: Schema, input: unknown): z.output<Schema> {
  const parsed = schema.safeParse(input);
  if (!parsed.success) throw notFound();
  return parsed.data;
}

function toFields(error: z.ZodError): ProblemField[] {
  return error.issues
    .slice(0, 50)
    .map((issue) => ({ path: issue.path.map(String).join('.'), message: issue.message }));
}

function toDetail(fields: ProblemField[]): string {
  const [first] = fields;
  if (first === undefined) return 'The input cannot be used.';
  const sentence = fieldSentence(first);
  return fields.length === 1 ? sentence : `${sentence.slice(0, -1)}; ${fields.length - 1} more to correct.`;
}

function toSentence(issue: z.core.$ZodRawIssue): string | undefined {
  switch (issue.code) {
    case 'invalid_type':
      return issue.input === undefined ? 'is needed' : `must be ${article(issue.expected)}`;
    case 'too_small':
      return boundSentence(issue.origin, 'at least', issue.minimum);
    case 'too_big':
      return boundSentence(issue.origin, 'at most', issue.maximum);
    case 'invalid_value':
      return `must be one of ${issue.values.map(String).join(', ')}`;
    case 'unrecognized_keys':
      return `has fields that are not known here: ${issue.keys.join(', ')}`;
    case 'invalid_format':
      return `is not written as ${article(issue.format)} has to be`;
    default:
      return undefined;
  }
}

function boundSentence(origin: string, bound: string, limit: number | bigint): string {
  if (origin === 'string') return `must have ${bound} ${limit} characters`;
  if (origin === 'array' || origin === 'set') return `must have ${bound} ${limit} entries`;
  return `must be ${bound} ${limit}`;
}

function article(noun: string): string {
  return /^[aeiou]/i.test(noun) ? `an ${noun}` : `a ${noun}`;
}
