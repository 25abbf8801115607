import { createSHA256 } from 'hash-wasm';
import type { HashAnswer } from '@/composables/uploads/hash-messages.ts';

const pieceBytes = 4 * 2 ** 20;

async function hashBlob(blob: Blob): Promise<string> {
  const hash = await createSHA256();
  for (let offset = 0; offset < blob.size; offset += pieceBytes) {
    hash.update(new Uint8Array(await blob.slice(offset, offset + pieceBytes).arrayBuffer()));
  }
  return hash.digest();
}

async function answerTo(blob: Blob): Promise<HashAnswer> {
  try {
    return { sha256: await hashBlob(blob) };
  } catch {
    return { failed: true };
  }
}

addEventListener('message', (message: MessageEvent<Blob>) => {
  void answerTo(message.data).then((answer) => postMessage(answer));
});
