/** Bytes read by place, so that a header of a file of any length is read without loading the file. */
export type ByteSource = {
  sizeBytes: number;
  /** Up to `length` bytes from `offset`; fewer only at the end. */
  read(offset: number, length: number): Promise<Uint8Array>;
};

/** What a browser's File or Blob offers, named here by shape because this code also runs without one. */
type Sliceable = {
  size: number;
  slice(start: number, end: number): { arrayBuffer(): Promise<ArrayBuffer> };
};

export function bytesSource(bytes: Uint8Array): ByteSource {
  return {
    sizeBytes: bytes.length,
    read: (offset, length) => Promise.resolve(bytes.subarray(offset, offset + length)),
  };
}

export function blobSource(blob: Sliceable): ByteSource {
  return {
    sizeBytes: blob.size,
    read: async (offset, length) => new Uint8Array(await blob.slice(offset, offset + length).arrayBuffer()),
  };
}
