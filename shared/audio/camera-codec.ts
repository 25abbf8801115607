type CameraCodec = {
  name: string;
  /** The sound was changed to make it smaller, and what was left out is gone. */
  isLossy: boolean;
};

/** Codecs of the sound of films, by family. */
export const CAMERA_CODECS = {
  pcm: { name: 'uncompressed PCM', isLossy: false },
  flac: { name: 'FLAC', isLossy: false },
  aac: { name: 'AAC', isLossy: true },
  mp3: { name: 'MP3', isLossy: true },
  opus: { name: 'Opus', isLossy: true },
  vorbis: { name: 'Vorbis', isLossy: true },
  ac3: { name: 'AC-3', isLossy: true },
  eac3: { name: 'Enhanced AC-3', isLossy: true },
  dts: { name: 'DTS', isLossy: true },
  ulaw: { name: 'G.711 mu-law', isLossy: true },
  alaw: { name: 'G.711 A-law', isLossy: true },
} as const satisfies Record<string, CameraCodec>;

export type CameraCodecKey = keyof typeof CAMERA_CODECS;
