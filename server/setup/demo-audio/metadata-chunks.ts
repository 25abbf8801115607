import {
  asciiBytes,
  chunkBytes,
  concatBytes,
  uint32,
  type WavChunk,
} from '../../../shared/audio/wav-envelope.ts';

/** Text beside the audio as recorders write it. */
export type DemoMetadata =
  | { kind: 'bext'; description: string; originator: string; reference: string; date: string; time: string }
  | { kind: 'info'; entries: Record<string, string> }
  | { kind: 'ixml'; xml: string };

export function metadataChunk(metadata: DemoMetadata): WavChunk {
  if (metadata.kind === 'bext') return bextChunk(metadata);
  if (metadata.kind === 'info') return infoChunk(metadata.entries);
  return { id: 'iXML', body: asciiBytes(metadata.xml) };
}

/** EBU Tech 3285, version 1, without loudness and coding history. */
function bextChunk(bext: DemoMetadata & { kind: 'bext' }): WavChunk {
  const body = new Uint8Array(602);
  const texts: [string, number, number][] = [
    [bext.description, 0, 256],
    [bext.originator, 256, 32],
    [bext.reference, 288, 32],
    [bext.date, 320, 10],
    [bext.time, 330, 8],
  ];
  for (const [text, offset, length] of texts) body.set(asciiBytes(text.slice(0, length)), offset);
  new DataView(body.buffer).setUint16(346, 1, true);
  return { id: 'bext', body };
}

/** `LIST` of type INFO; each text ends with a NUL. */
export function infoChunk(entries: Record<string, string>): WavChunk {
  const chunks = Object.entries(entries).map(([id, text]) =>
    chunkBytes({ id, body: asciiBytes(`${text}\0`) }),
  );
  return { id: 'LIST', body: concatBytes([asciiBytes('INFO'), ...chunks]) };
}

export type CueMark = { sample: number; label: string };

/** Marks with labels: a `cue ` chunk and the `LIST` of type adtl that names them. */
export function cueChunks(marks: CueMark[]): WavChunk[] {
  const points = marks.map(({ sample }, i) =>
    concatBytes([uint32(i + 1), uint32(sample), asciiBytes('data'), uint32(0), uint32(0), uint32(sample)]),
  );
  const labels = marks.map(({ label }, i) =>
    chunkBytes({ id: 'labl', body: concatBytes([uint32(i + 1), asciiBytes(`${label}\0`)]) }),
  );
  return [
    { id: 'cue ', body: concatBytes([uint32(marks.length), ...points]) },
    { id: 'LIST', body: concatBytes([asciiBytes('adtl'), ...labels]) },
  ];
}
