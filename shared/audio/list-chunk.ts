import { asciiText, decodeText } from '../lib/byte-text.ts';
import { metadataField, presentFields, UNREAD_KEY, type MetadataField } from './metadata-field.ts';

const MAX_ENTRIES = 1000;
/** Bytes before the text: the cue's number, and for `ltxt` also length, purpose, country, language, dialect and code page. */
const CUE_TEXT_OFFSETS: Record<string, number> = { labl: 4, note: 4, ltxt: 20 };

type Entry = { id: string; body: Uint8Array };

/** The texts of a `LIST` chunk of type INFO or adtl; of another type only that it is there. */
export function listFields(body: Uint8Array): MetadataField[] {
  const type = asciiText(body, 0, 4);
  if (type === 'INFO') return infoFields(listEntries(body));
  if (type === 'adtl') return cueTextFields(listEntries(body));
  return presentFields([metadataField(`LIST ${type}`, UNREAD_KEY, `${body.length} bytes`)]);
}

function infoFields(entries: Entry[]): MetadataField[] {
  return presentFields(entries.map(({ id, body }) => metadataField('INFO', id, decodeText(body))));
}

function cueTextFields(entries: Entry[]): MetadataField[] {
  return presentFields(entries.map(cueTextField));
}

function cueTextField({ id, body }: Entry): MetadataField | undefined {
  const textOffset = CUE_TEXT_OFFSETS[id];
  if (textOffset === undefined || body.length <= textOffset) return undefined;
  const cue = new DataView(body.buffer, body.byteOffset, body.byteLength).getUint32(0, true);
  return metadataField('adtl', `${id} ${cue}`, decodeText(body.subarray(textOffset)));
}

/** The sub-chunks after the list type. An entry that claims more than is there ends the list with what is there. */
function listEntries(list: Uint8Array): Entry[] {
  const view = new DataView(list.buffer, list.byteOffset, list.byteLength);
  const entries: Entry[] = [];
  for (let at = 4; at + 8 <= list.length && entries.length < MAX_ENTRIES;) {
    const sizeBytes = view.getUint32(at + 4, true);
    entries.push({ id: asciiText(list, at, 4), body: list.subarray(at + 8, at + 8 + sizeBytes) });
    at += 8 + sizeBytes + (sizeBytes % 2);
  }
  return entries;
}

/** How many marks a `cue ` chunk holds. */
export function cueFields(body: Uint8Array): MetadataField[] {
  if (body.length < 4) return [];
  const marks = Math.min(
    new DataView(body.buffer, body.byteOffset, body.byteLength).getUint32(0, true),
    Math.floor((body.length - 4) / 24),
  );
  return marks === 0 ? [] : [{ chunk: 'cue', key: 'marks', value: String(marks) }];
}
