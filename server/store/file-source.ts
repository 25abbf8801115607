import { open } from 'node:fs/promises';
import type { ByteSource } from '../../shared/audio/byte-source.ts';

/** Lends a file as a source of bytes by place, and closes it afterwards. */
export async function withFileSource<Result>(
  file: string,
  use: (source: ByteSource) => Promise<Result>,
): Promise<Result> {
  const handle = await open(file, 'r');
  try {
    const { size } = await handle.stat();
    return await use({
      sizeBytes: size,
      read: async (offset, length) => {
        const wanted = Math.max(0, Math.min(length, size - offset));
        const { buffer, bytesRead } = await handle.read(Buffer.alloc(wanted), 0, wanted, offset);
        return buffer.subarray(0, bytesRead);
      },
    });
  } finally {
    await handle.close();
  }
}
