export const TAG_PCM = 0x0001;
export const TAG_FLOAT = 0x0003;
export const TAG_EXTENSIBLE = 0xfffe;

/** Format tags of the WAVE registry (RFC 2361 and mmreg.h) that recorders and converters write, in words. */
const CODECS: Record<number, string> = {
  0x0002: 'Microsoft ADPCM',
  0x0006: 'A-law',
  0x0007: 'mu-law',
  0x0008: 'DTS',
  0x0010: 'OKI ADPCM',
  0x0011: 'IMA ADPCM',
  0x0014: 'G.723 ADPCM',
  0x0016: 'G.723 ADPCM',
  0x0020: 'Yamaha ADPCM',
  0x0031: 'GSM 6.10',
  0x0040: 'G.721 ADPCM',
  0x0045: 'G.726 ADPCM',
  0x0050: 'MPEG audio (layer 1 or 2)',
  0x0055: 'MP3',
  0x0064: 'G.726 ADPCM',
  0x0092: 'Dolby AC-3',
  0x00ff: 'AAC',
  0x0160: 'Windows Media Audio',
  0x0161: 'Windows Media Audio',
  0x0162: 'Windows Media Audio',
  0x0163: 'Windows Media Audio (lossless)',
  0x0270: 'ATRAC',
  0x1600: 'AAC',
  0x1610: 'AAC',
  0x2000: 'Dolby AC-3',
  0x2001: 'DTS',
  0x566f: 'Vorbis',
  0x674f: 'Vorbis',
  0x704f: 'Opus',
  0xf1ac: 'FLAC',
};

export function codecName(tag: number): string {
  return CODECS[tag] ?? `an unknown coding (format tag 0x${tag.toString(16).padStart(4, '0')})`;
}
