import { asciiBytes, concatBytes, uint32 } from '../../../shared/audio/wav-envelope.ts';

export interface ZipFile {
  name: string;
  bytes: Uint8Array;
  /** What the headers call the method; 0 is stored. The bytes are written as they are. */
  method?: number;
  /** Sizes and places in 64 bits, as archives past 4 GiB have them. */
  isWide?: boolean;
}

function uint16(value: number): Uint8Array {
  return Uint8Array.of(value & 0xff, value >> 8);
}

function uint64(value: number): Uint8Array {
  return concatBytes([uint32(value % 2 ** 32), uint32(Math.floor(value / 2 ** 32))]);
}

/** An archive of files that are not compressed (PKWARE APPNOTE 6.3.10, 4.3). Checksums are left at 0. */
export function writeZip(files: readonly ZipFile[]): Uint8Array<ArrayBuffer> {
  const locals: Uint8Array[] = [];
  const centrals: Uint8Array[] = [];
  let offset = 0;
  for (const file of files) {
    const local = concatBytes([localHeader(file), file.bytes]);
    centrals.push(centralHeader(file, offset));
    locals.push(local);
    offset += local.length;
  }
  const central = concatBytes(centrals);
  const counts = [uint16(files.length), uint16(files.length)];
  const place = [uint32(central.length), uint32(offset)];
  const end = concatBytes([uint32(0x06054b50), uint16(0), uint16(0), ...counts, ...place, uint16(0)]);
  return concatBytes([...locals, central, end]);
}

function common({ name, method = 0 }: ZipFile, sizeBytes: number, extraBytes: number): Uint8Array {
  const sizes = [uint32(sizeBytes), uint32(sizeBytes)];
  const head = [uint16(20), uint16(0), uint16(method), uint32(0), uint32(0), ...sizes];
  return concatBytes([...head, uint16(name.length), uint16(extraBytes)]);
}

function localHeader(file: ZipFile): Uint8Array {
  return concatBytes([uint32(0x04034b50), common(file, file.bytes.length, 0), asciiBytes(file.name)]);
}

function centralHeader(file: ZipFile, offset: number): Uint8Array {
  const { name, bytes, isWide = false } = file;
  const wide = [uint64(bytes.length), uint64(bytes.length), uint64(offset)];
  const extra = isWide ? concatBytes([uint16(1), uint16(24), ...wide]) : new Uint8Array(0);
  const head = [
    uint32(0x02014b50),
    uint16(20),
    common(file, isWide ? 0xffffffff : bytes.length, extra.length),
  ];
  const rest = [uint16(0), uint16(0), uint16(0), uint32(0), uint32(isWide ? 0xffffffff : offset)];
  return concatBytes([...head, ...rest, asciiBytes(name), extra]);
}
