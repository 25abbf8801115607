/**
 * A piece of a spectrogram as bytes, the same for the server that makes it and the browser that draws it.
 *
 * Layout, little endian: magic "RCT1", u16 version, u16 bins, u32 columns, u32 samplesPerColumn, f64 startSample,
 * f32 lowHz, f32 highHz, f32 minimumDb, f32 dbPerCode; then `columns * bins` codes, column after column, lowest
 * frequency first. Level of a code in dB: minimumDb + code * dbPerCode.
 */
export interface TileHeader {
  bins: number;
  columns: number;
  samplesPerColumn: number;
  startSample: number;
  /** Lower edge of the lowest bin. */
  lowHz: number;
  /** Upper edge of the highest bin. */
  highHz: number;
  minimumDb: number;
  dbPerCode: number;
}

export interface Tile extends TileHeader {
  codes: Uint8Array;
}

export const TILE_HEADER_BYTES = 40;
export const TILE_MINIMUM_DB = -120;
export const TILE_DB_PER_CODE = 0.5;

const MAGIC = 0x31544352;
const VERSION = 1;

export function encodeTile(tile: Tile): Uint8Array<ArrayBuffer> {
  if (tile.codes.length !== tile.columns * tile.bins) {
    throw new RangeError(
      `codes: ${tile.codes.length}, expected ${tile.columns} columns of ${tile.bins} bins`,
    );
  }
  const bytes = new Uint8Array(TILE_HEADER_BYTES + tile.codes.length);
  const view = new DataView(bytes.buffer);
  view.setUint32(0, MAGIC, true);
  view.setUint16(4, VERSION, true);
  view.setUint16(6, tile.bins, true);
  view.setUint32(8, tile.columns, true);
  view.setUint32(12, tile.samplesPerColumn, true);
  view.setFloat64(16, tile.startSample, true);
  view.setFloat32(24, tile.lowHz, true);
  view.setFloat32(28, tile.highHz, true);
  view.setFloat32(32, tile.minimumDb, true);
  view.setFloat32(36, tile.dbPerCode, true);
  bytes.set(tile.codes, TILE_HEADER_BYTES);
  return bytes;
}

/** @throws RangeError when the bytes are no tile, of another version, or cut short. */
export function decodeTile(bytes: Uint8Array): Tile {
  if (bytes.length < TILE_HEADER_BYTES) throw new RangeError(`tile: ${bytes.length} bytes are too few`);
  const view = new DataView(bytes.buffer, bytes.byteOffset, bytes.byteLength);
  if (view.getUint32(0, true) !== MAGIC) throw new RangeError('tile: the first four bytes are not "RCT1"');
  const version = view.getUint16(4, true);
  if (version !== VERSION) throw new RangeError(`tile: version ${version} is not known`);
  const bins = view.getUint16(6, true);
  const columns = view.getUint32(8, true);
  const endByte = TILE_HEADER_BYTES + bins * columns;
  if (bytes.length !== endByte) throw new RangeError(`tile: ${bytes.length} bytes, expected ${endByte}`);
  return {
    bins,
    columns,
    samplesPerColumn: view.getUint32(12, true),
    startSample: view.getFloat64(16, true),
    lowHz: view.getFloat32(24, true),
    highHz: view.getFloat32(28, true),
    minimumDb: view.getFloat32(32, true),
    dbPerCode: view.getFloat32(36, true),
    codes: bytes.subarray(TILE_HEADER_BYTES, endByte),
  };
}
