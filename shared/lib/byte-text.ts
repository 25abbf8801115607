/** Printable ASCII of `length` bytes; any other byte becomes `?`, so that a chunk id can stand in a sentence. */
export function asciiText(bytes: Uint8Array, offset: number, length: number): string {
  let text = '';
  for (let i = offset; i < offset + length; i++) {
    const code = bytes[i] ?? 0;
    text += code >= 0x20 && code < 0x7f ? String.fromCharCode(code) : '?';
  }
  return text;
}

/**
 * Text of unknown encoding: UTF-16 by its byte order mark, else UTF-8 where the bytes are valid UTF-8, else Latin-1.
 * Ends at the first NUL (strings in chunks are padded with them). Never throws.
 */
export function decodeText(bytes: Uint8Array): string {
  if (bytes[0] === 0xff && bytes[1] === 0xfe) return untilNul(utf16Text(bytes, 'little'));
  if (bytes[0] === 0xfe && bytes[1] === 0xff) return untilNul(utf16Text(bytes, 'big'));
  const hasMark = bytes[0] === 0xef && bytes[1] === 0xbb && bytes[2] === 0xbf;
  const body = hasMark ? bytes.subarray(3) : bytes;
  const nul = body.indexOf(0);
  const string = nul < 0 ? body : body.subarray(0, nul);
  return utf8Text(string) ?? latin1Text(string);
}

/** Strict UTF-8, or `undefined` where a sequence is malformed, overlong, a surrogate or past U+10FFFF. */
function utf8Text(bytes: Uint8Array): string | undefined {
  const parts: string[] = [];
  for (let i = 0; i < bytes.length;) {
    const lead = bytes[i]!;
    const length = lead < 0x80 ? 1 : lead >= 0xf0 ? 4 : lead >= 0xe0 ? 3 : 2;
    const point = length === 1 ? lead : utf8Point(bytes, i, length);
    if (point === undefined) return undefined;
    parts.push(String.fromCodePoint(point));
    i += length;
  }
  return parts.join('');
}

function utf8Point(bytes: Uint8Array, at: number, length: number): number | undefined {
  const lead = bytes[at]!;
  if (lead < 0xc2 || lead > 0xf4 || at + length > bytes.length) return undefined;
  let point = lead & (0xff >> (length + 1));
  for (let i = 1; i < length; i++) {
    const next = bytes[at + i]!;
    if ((next & 0xc0) !== 0x80) return undefined;
    point = (point << 6) | (next & 0x3f);
  }
  const smallest = length === 2 ? 0x80 : length === 3 ? 0x800 : 0x10000;
  if (point < smallest || point > 0x10ffff || (point >= 0xd800 && point <= 0xdfff)) return undefined;
  return point;
}

function latin1Text(bytes: Uint8Array): string {
  const parts: string[] = [];
  for (const byte of bytes) parts.push(String.fromCharCode(byte));
  return parts.join('');
}

function utf16Text(bytes: Uint8Array, order: 'little' | 'big'): string {
  const highAt = order === 'little' ? 1 : 0;
  const parts: string[] = [];
  for (let i = 2; i + 1 < bytes.length; i += 2) {
    parts.push(String.fromCharCode((bytes[i + highAt]! << 8) | bytes[i + 1 - highAt]!));
  }
  return parts.join('');
}

function untilNul(text: string): string {
  const nul = text.indexOf('\0');
  return nul < 0 ? text : text.slice(0, nul);
}
