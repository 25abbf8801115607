import { openPromise } from 'yauzl';

export interface ArchivedFile {
  /** Place of the first byte in the archive: entries are stored as they are, so a file is a plain range of it. */
  startByte: number;
  sizeBytes: number;
}

/** Finds one file of a built archive by its path below the base directory; `null` where there is none. */
export async function locateInArchive(archivePath: string, path: string): Promise<ArchivedFile | null> {
  const zip = await openPromise(archivePath, { lazyEntries: true, autoClose: false, strictFileNames: true });
  try {
    for await (const entry of zip.eachEntry()) {
      if (entry.fileName.slice(entry.fileName.indexOf('/') + 1) !== path) continue;
      const { fileDataStart } = await zip.readLocalFileHeaderPromise(entry, { minimal: true });
      return { startByte: fileDataStart, sizeBytes: entry.uncompressedSize };
    }
    return null;
  } finally {
    zip.close();
  }
}
