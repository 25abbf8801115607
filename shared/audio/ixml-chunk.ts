import { decodeText } from '../lib/byte-text.ts';
import { metadataField, type MetadataField } from './metadata-field.ts';

const MAX_FIELDS = 1000;
const MAX_DEPTH = 32;
const PREDEFINED: Record<string, string> = { amp: '&', lt: '<', gt: '>', quot: '"', apos: "'" };

/**
 * The texts of an `iXML` chunk with the path of their element (`USER`, `TRACK_LIST/TRACK/NAME`). Text only: declarations, comments
 * and attributes are passed over and no entity is ever expanded but the five that XML predefines. One pass, never throws.
 */
export function ixmlFields(body: Uint8Array): MetadataField[] {
  const xml = decodeText(body);
  const fields: MetadataField[] = [];
  const path: string[] = [];
  let text = '';
  for (let at = 0; at < xml.length && fields.length < MAX_FIELDS;) {
    const open = xml.indexOf('<', at);
    text += open < 0 ? xml.slice(at) : xml.slice(at, open);
    if (open < 0) break;
    const token = tokenAt(xml, open);
    at = token.end;
    if (token.kind === 'text') text += token.value;
    if (token.kind === 'text' || token.kind === 'aside') continue;
    pushText(fields, path, text);
    text = '';
    moveAlong(path, token);
  }
  pushText(fields, path, text);
  return fields;
}

type Token = { kind: 'open' | 'close' | 'text' | 'aside'; value: string; end: number };

function tokenAt(xml: string, open: number): Token {
  if (xml.startsWith('<![CDATA[', open)) {
    const end = endOf(xml, ']]>', open + 9);
    return { kind: 'text', value: xml.slice(open + 9, end.before), end: end.after };
  }
  if (xml.startsWith('<!--', open)) return aside(endOf(xml, '-->', open + 4).after);
  const end = endOf(xml, '>', open + 1);
  const inside = xml.slice(open + 1, end.before);
  if (inside.startsWith('?') || inside.startsWith('!') || inside.endsWith('/')) return aside(end.after);
  if (inside.startsWith('/')) return { kind: 'close', value: '', end: end.after };
  return { kind: 'open', value: inside.split(/\s/, 1)[0] ?? '', end: end.after };
}

function aside(end: number): Token {
  return { kind: 'aside', value: '', end };
}

function endOf(xml: string, mark: string, from: number): { before: number; after: number } {
  const at = xml.indexOf(mark, from);
  return at < 0 ? { before: xml.length, after: xml.length } : { before: at, after: at + mark.length };
}

function moveAlong(path: string[], token: Token): void {
  if (token.kind === 'close') path.pop();
  else if (path.length < MAX_DEPTH) path.push(token.value.slice(0, 64));
}

function pushText(fields: MetadataField[], path: string[], text: string): void {
  const key = path.slice(1).join('/') || path[0] || 'text';
  const value = text.replace(/&(amp|lt|gt|quot|apos);/g, (_, name: string) => PREDEFINED[name] ?? '');
  const field = metadataField('iXML', key, value);
  if (field) fields.push(field);
}
