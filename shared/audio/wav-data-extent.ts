import { asciiText } from '../lib/byte-text.ts';
import { isKnownChunk } from './wav-chunk-ids.ts';
import { SIZE_ELSEWHERE } from './wav-wide-sizes.ts';
import type { ReadBytes } from './window-reader.ts';

const FOUR_GIB = 0x1_0000_0000;

export type DataExtent = {
  dataOffset: number;
  /** Bytes that are there. */
  presentBytes: number;
  /** Bytes the header promises; `null` where it does not know and the rest of the file was taken. */
  promisedBytes: number | null;
  warnings: string[];
};

export type DataClaim = {
  dataOffset: number;
  /** The size by the chunk's own field, or by ds64 where the field points there. */
  declaredBytes: number;
  fileBytes: number;
  read: ReadBytes;
};

/** Where the samples lie, by the header and by the real length of the file, which has the last word. */
export async function dataExtent(claim: DataClaim): Promise<DataExtent> {
  const { dataOffset, declaredBytes, fileBytes } = claim;
  const restBytes = Math.max(0, fileBytes - dataOffset);
  if (await isUnfinished(claim, restBytes)) {
    return toEndOfFile(
      dataOffset,
      restBytes,
      'The header does not say how much audio follows, as when a recorder is cut off',
    );
  }
  // A plain WAV file past 4 GiB: the field has kept the size modulo 2^32.
  if (restBytes > declaredBytes && (restBytes - declaredBytes) % FOUR_GIB === 0) {
    return toEndOfFile(
      dataOffset,
      restBytes,
      'The audio is larger than the size field of a plain WAV file can say',
    );
  }
  return {
    dataOffset,
    presentBytes: Math.min(declaredBytes, restBytes),
    promisedBytes: declaredBytes,
    warnings: [],
  };
}

function toEndOfFile(dataOffset: number, restBytes: number, reason: string): DataExtent {
  const warning = `${reason}; everything up to the end of the file was taken.`;
  return { dataOffset, presentBytes: restBytes, promisedBytes: null, warnings: [warning] };
}

async function isUnfinished(claim: DataClaim, restBytes: number): Promise<boolean> {
  if (restBytes === 0) return false;
  if (claim.declaredBytes === SIZE_ELSEWHERE) return true;
  return claim.declaredBytes === 0 && !(await isFollowedByChunk(claim, restBytes));
}

/** A size of 0 is the truth where another chunk comes right after: then there is no audio. */
async function isFollowedByChunk({ dataOffset, read }: DataClaim, restBytes: number): Promise<boolean> {
  const head = await read(dataOffset, 8);
  if (head.length < 8 || !isKnownChunk(asciiText(head, 0, 4))) return false;
  const sizeBytes = new DataView(head.buffer, head.byteOffset, 8).getUint32(4, true);
  return sizeBytes <= restBytes - 8;
}
