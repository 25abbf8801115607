import type { z } from 'zod';
import { completeUploadSchema, declarationSchema } from '../../../shared/contract/uploads.ts';
import { validate } from '../../http/validate.ts';
import type { ReceivedForm } from './multipart-form.ts';

const formSchema = declarationSchema.extend(completeUploadSchema.shape).strict();

/**
 * The declaration as a form carries it: everything is text, numbers in digits, and `sensitivity` repeated or parted
 * by commas.
 */
export function readDeclaration(fields: ReceivedForm['fields']): z.output<typeof formSchema> {
  const input = Object.fromEntries([...fields].map(([name, values]) => [name, toValue(name, values)]));
  return validate(formSchema, input);
}

function toValue(name: string, values: string[]): unknown {
  const [first = ''] = values;
  if (name === 'sensitivity')
    return values
      .flatMap((value) => value.split(','))
      .map((part) => part.trim())
      .filter(Boolean);
  if (values.length > 1) return values;
  if (name === 'layout' || name === 'camera') return toParts(first);
  if (name === 'runOffsetNs' || name === 'timeExpansion') return toNumber(first);
  return first;
}

/** What has parts comes as JSON. What is none is told by the schema. */
function toParts(text: string): unknown {
  if (text.trim() === '') return undefined;
  try {
    return JSON.parse(text);
  } catch {
    return text;
  }
}

function toNumber(text: string): number | string | undefined {
  if (text.trim() === '') return undefined;
  return Number.isFinite(Number(text)) ? Number(text) : text;
}
