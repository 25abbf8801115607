import { withFileSource } from '../../store/file-source.ts';
import type { VideoContainer } from '../../../shared/contract/videos.ts';
import { ProblemError } from '../../http/problem.ts';

/** What tells the tracks of a film is read into memory: a real one is some megabytes for hours of pictures. */
const mostTableBytes = 64 * 2 ** 20;
const mostBoxes = 200_000;

export function filmRefused(detail: string, cause?: unknown): ProblemError {
  return new ProblemError('file-refused', detail, { cause });
}

interface Bytes {
  sizeBytes: number;
  read(offset: number, length: number): Promise<Uint8Array>;
}

/** Which container the bytes are, by their structure and never by the name of the file. */
export function containerOf(path: string): Promise<VideoContainer> {
  return withFileSource(path, async (source) => {
    const head = Buffer.from(await source.read(0, 16));
    if (head.length === 16 && head.readUInt32BE(0) === 0x1a45dfa3) return 'webm';
    if (head.toString('latin1', 4, 8) !== 'ftyp')
      throw filmRefused(
        'This is no film in MP4 or WebM. Convert it to one of them, without changing its speed.',
      );
    if (head.toString('latin1', 8, 10) === 'qt')
      throw filmRefused('This is a QuickTime film. Save it as MP4; the pictures can stay as they are.');
    await requireWholeBoxes(source);
    return 'mp4';
  });
}

/** The boxes at the top follow each other to the last byte, and the one that tells the tracks is there (ISO/IEC 14496-12, 4.2). */
async function requireWholeBoxes(source: Bytes): Promise<void> {
  let hasTable = false;
  let at = 0;
  for (let boxes = 0; at < source.sizeBytes; boxes++) {
    const { kind, sizeBytes } = await readBox(source, at);
    if (boxes >= mostBoxes || sizeBytes < 8 || at + sizeBytes > source.sizeBytes)
      throw filmRefused(
        'This film is cut off or damaged: its parts do not end where they say. Copy it from the camera again.',
      );
    if (kind === 'moov' && sizeBytes > mostTableBytes)
      throw filmRefused('The table of the tracks of this film is larger than any film needs.');
    hasTable ||= kind === 'moov';
    at += sizeBytes;
  }
  if (!hasTable)
    throw filmRefused(
      'This film is not whole: the list of its tracks, which a camera writes last, is missing. Copy it from the camera again.',
    );
}

async function readBox(source: Bytes, at: number): Promise<{ kind: string; sizeBytes: number }> {
  const head = Buffer.from(await source.read(at, 16));
  if (head.length < 8) return { kind: '', sizeBytes: 0 };
  const kind = head.toString('latin1', 4, 8);
  const told = head.readUInt32BE(0);
  // 1 stands for a wide size after the kind, 0 for "to the end".
  if (told === 0) return { kind, sizeBytes: source.sizeBytes - at };
  if (told !== 1) return { kind, sizeBytes: told };
  return { kind, sizeBytes: head.length < 16 ? 0 : Number(head.readBigUInt64BE(8)) };
}
