import { decodeText } from '../lib/byte-text.ts';
import { metadataField, presentFields, type MetadataField } from './metadata-field.ts';

/** Fixed text fields of the broadcast extension: EBU Tech 3285, 2.3. */
const TEXTS: [key: string, offset: number, length: number][] = [
  ['Description', 0, 256],
  ['Originator', 256, 32],
  ['OriginatorReference', 288, 32],
  ['OriginationDate', 320, 10],
  ['OriginationTime', 330, 8],
];
const TIME_REFERENCE_OFFSET = 338;
const CODING_HISTORY_OFFSET = 602;

/** The fields of a `bext` chunk; those a shorter chunk lacks are left out. */
export function bextFields(body: Uint8Array): MetadataField[] {
  const texts = TEXTS.map(([key, offset, length]) =>
    metadataField('bext', key, decodeText(body.subarray(offset, offset + length))),
  );
  const history = decodeText(body.subarray(CODING_HISTORY_OFFSET));
  return presentFields([...texts, timeReference(body), metadataField('bext', 'CodingHistory', history)]);
}

/** Samples since midnight, in two 32-bit halves. */
function timeReference(body: Uint8Array): MetadataField | undefined {
  if (body.length < TIME_REFERENCE_OFFSET + 8) return undefined;
  const view = new DataView(body.buffer, body.byteOffset, body.byteLength);
  const high = view.getUint32(TIME_REFERENCE_OFFSET + 4, true);
  const samples = view.getUint32(TIME_REFERENCE_OFFSET, true) + high * 0x1_0000_0000;
  return samples === 0 ? undefined : metadataField('bext', 'TimeReference', String(samples));
}
