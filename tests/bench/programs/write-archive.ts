import { basename } from 'node:path';
import { readChunks, withDigest, type Bytes } from '../../../server/packaging/digests.ts';
import { openZipWriter } from '../../../server/packaging/zip-writer.ts';

// Packs files as a release is packed and prints the sha256. Arguments: "plain" or "digests", the archive, the files.
const [mode, path = '', ...files] = process.argv.slice(2);
const zip = openZipWriter({ path, date: new Date(Date.UTC(2026, 0, 1)) });
for (const file of files) {
  const chunks: Bytes = readChunks(file);
  // A release holds both digests of each of its files.
  const bytes = mode === 'digests' ? withDigest(chunks, () => undefined) : chunks;
  await zip.add(basename(file), bytes);
}
const { sha256 } = await zip.finish();
process.stdout.write(sha256);
