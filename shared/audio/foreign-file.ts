import { asciiText } from '../lib/byte-text.ts';
import { RefusedFileError, type FileRefusal } from './refused-file-error.ts';

type Mark = { at: number; bytes: string; name: string; kind: 'lossy' | 'audio' | 'film' | 'video' | 'other' };

/** First bytes of files that are often mistaken for a recording; `bytes` are Latin-1 characters at `at`. */
const MARKS: Mark[] = [
  { at: 0, bytes: 'ID3', name: 'an MP3 file', kind: 'lossy' },
  { at: 0, bytes: 'OggS', name: 'an Ogg file (Vorbis or Opus)', kind: 'lossy' },
  { at: 0, bytes: 'FORM', name: 'an AIFF file', kind: 'audio' },
  { at: 0, bytes: 'caff', name: 'a Core Audio file', kind: 'audio' },
  { at: 0, bytes: '.snd', name: 'an AU file', kind: 'audio' },
  { at: 0, bytes: 'riff\x2e\x91\xcf\x11', name: 'a Wave64 file', kind: 'audio' },
  { at: 0, bytes: 'MThd', name: 'a MIDI file', kind: 'other' },
  { at: 4, bytes: 'ftypM4A', name: 'an M4A file', kind: 'lossy' },
  { at: 4, bytes: 'ftypqt', name: 'a QuickTime film', kind: 'film' },
  { at: 4, bytes: 'ftyp', name: 'an MP4 film', kind: 'film' },
  { at: 4, bytes: 'moov', name: 'a QuickTime film', kind: 'film' },
  { at: 4, bytes: 'mdat', name: 'a QuickTime film', kind: 'film' },
  { at: 4, bytes: 'wide', name: 'a QuickTime film', kind: 'film' },
  { at: 0, bytes: '\x1a\x45\xdf\xa3', name: 'a Matroska or WebM film', kind: 'video' },
  { at: 0, bytes: '\x30\x26\xb2\x75', name: 'a Windows Media file', kind: 'lossy' },
  { at: 0, bytes: '\x89PNG', name: 'a PNG picture', kind: 'other' },
  { at: 0, bytes: '\xff\xd8\xff', name: 'a JPEG picture', kind: 'other' },
  { at: 0, bytes: 'GIF8', name: 'a GIF picture', kind: 'other' },
  { at: 0, bytes: 'II*\0', name: 'a TIFF picture', kind: 'other' },
  { at: 0, bytes: 'MM\0*', name: 'a TIFF picture', kind: 'other' },
  { at: 0, bytes: '%PDF', name: 'a PDF document', kind: 'other' },
  { at: 0, bytes: 'PK\x03\x04', name: 'a ZIP archive (or an office document)', kind: 'other' },
  { at: 0, bytes: '\x1f\x8b', name: 'a gzip archive', kind: 'other' },
  { at: 0, bytes: "7z\xbc\xaf'\x1c", name: 'a 7-Zip archive', kind: 'other' },
  { at: 0, bytes: 'SQLite format 3', name: 'an SQLite database', kind: 'other' },
  { at: 0, bytes: '\x89HDF', name: 'an HDF5 file', kind: 'other' },
  { at: 0, bytes: '\x93NUMPY', name: 'a NumPy array file', kind: 'other' },
  { at: 0, bytes: 'MATLAB', name: 'a MATLAB file', kind: 'other' },
  { at: 0, bytes: '\x7fELF', name: 'a program', kind: 'other' },
  { at: 0, bytes: 'MZ', name: 'a program', kind: 'other' },
];

const RIFF_FORMS: Record<string, string> = {
  'AVI ': 'an AVI film',
  WEBP: 'a WebP picture',
  RMID: 'a MIDI file',
  ACON: 'an animated cursor',
};

const ADVICE = {
  lossy:
    'Lossy compression has removed what lies above about 16 to 20 kHz, so it cannot be measured: bring in the file from the recorder.',
  audio: 'Save it as WAV or FLAC with the same rate and width.',
  film: 'The page for bringing in takes its sound out; elsewhere, take it out first as uncompressed WAV.',
  video: 'Take the sound track out as uncompressed WAV.',
  other: 'WAV and FLAC files can be brought in, and samples whose layout is declared.',
};

/** The refusal for a file whose first bytes are not those of a WAV file; names what it is where that can be seen. */
export function foreignFileRefusal(head: Uint8Array): RefusedFileError {
  if (asciiText(head, 0, 4) === 'RIFX') {
    return new RefusedFileError(
      'big-endian',
      'This is a big-endian WAV file (RIFX), which is not read here. Save it as an ordinary WAV file (RIFF).',
    );
  }
  const form = asciiText(head, 0, 4) === 'RIFF' ? RIFF_FORMS[asciiText(head, 8, 4)] : undefined;
  if (form) return refusal(form, form.includes('film') ? 'video' : 'other');
  const mark = MARKS.find((candidate) => hasMark(head, candidate));
  if (mark) return refusal(mark.name, mark.kind);
  if (isMpegFrame(head)) return refusal('an MP3 file', 'lossy');
  if (isText(head)) return textRefusal(head);
  return new RefusedFileError(
    'unknown',
    'The first bytes of this file do not say what it is; it is neither WAV nor FLAC. Raw samples can be brought in once it is declared how they lie.',
  );
}

function textRefusal(head: Uint8Array): RefusedFileError {
  const start = asciiText(head, 0, head.length).trimStart().toLowerCase();
  if (/^(\?*)(<!doctype html|<html)/.test(start)) return refusal('a web page (HTML)', 'other');
  return new RefusedFileError(
    'text',
    'This is a text file. A table of numbers can be brought in once it is declared what its columns hold.',
  );
}

const codes: Record<Mark['kind'], FileRefusal> = {
  lossy: 'other-audio',
  audio: 'other-audio',
  film: 'film',
  video: 'other-audio',
  other: 'not-audio',
};

function refusal(name: string, kind: Mark['kind']): RefusedFileError {
  return new RefusedFileError(codes[kind], `This is ${name}. ${ADVICE[kind]}`);
}

function hasMark(head: Uint8Array, mark: Mark): boolean {
  for (let i = 0; i < mark.bytes.length; i++) {
    if (head[mark.at + i] !== mark.bytes.charCodeAt(i)) return false;
  }
  return true;
}

/** ISO 11172-3, 2.4.1.3: eleven set bits, then version, layer, bit rate and rate that are not the reserved ones. */
function isMpegFrame(head: Uint8Array): boolean {
  const second = head[1] ?? 0;
  const third = head[2] ?? 0;
  const isSync = head[0] === 0xff && (second & 0xe0) === 0xe0;
  return (
    isSync && (second & 0x18) !== 0x08 && (second & 0x06) !== 0 && third >> 4 !== 15 && (third & 12) !== 12
  );
}

/** No control characters, and few letters past ASCII: samples can look like text of another script. */
function isText(head: Uint8Array): boolean {
  if (head.length < 4 || !head.every(isTextByte)) return false;
  return head.filter((byte) => byte >= 0x80).length <= head.length / 8;
}

function isTextByte(byte: number): boolean {
  return byte >= 0x20 ? byte !== 0x7f : byte === 0x09 || byte === 0x0a || byte === 0x0d;
}
