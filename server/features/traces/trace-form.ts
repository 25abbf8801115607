import { createTraceSchema, type CreateTrace } from '../../../shared/contract/traces.ts';
import { invalidField } from '../../http/problem.ts';
import { validate } from '../../http/validate.ts';
import type { ReceivedForm } from '../uploads/multipart-form.ts';

/** What is told with a table, as JSON in the one field `trace`. */
export function readTraceForm(fields: ReceivedForm['fields']): CreateTrace {
  for (const name of fields.keys())
    if (name !== 'trace') throw invalidField(name, 'is not a field of this form');
  const [text, second] = fields.get('trace') ?? [];
  if (text === undefined) throw invalidField('trace', 'is needed');
  if (second !== undefined) throw invalidField('trace', 'is told once, not several times');
  return validate(createTraceSchema, parsed(text));
}

function parsed(text: string): unknown {
  try {
    return JSON.parse(text);
  } catch {
    throw invalidField('trace', 'is not JSON');
  }
}
