import type { Response } from 'express';

export interface FileAnswer {
  /** Absolute path of our own, never made from what a person typed. */
  path: string;
  contentType: string;
  /** Strong validator without quotes, for example the sha256. */
  etag: string;
  /** Name in the person's downloads; shown inline where it is missing. */
  downloadName?: string;
  cacheControl: string;
}

/** Sends a file with ranges and validators. Whatever it holds, a browser never runs it. */
export function sendFile(response: Response, file: FileAnswer): Promise<void> {
  response.setHeader('ETag', `"${file.etag}"`);
  response.setHeader('Cache-Control', file.cacheControl);
  response.setHeader('Content-Type', file.contentType);
  response.setHeader('Content-Security-Policy', "default-src 'none'; sandbox");
  response.setHeader('Content-Disposition', toDisposition(file.downloadName));
  const options = {
    acceptRanges: true,
    dotfiles: 'allow' as const,
    cacheControl: false,
    lastModified: false,
  };
  return new Promise((resolve, reject) => {
    response.sendFile(file.path, options, (error: unknown) => {
      if (error instanceof Error && !isAbort(error)) reject(error);
      else resolve();
    });
  });
}

/** RFC 6266: a plain name for old readers, the exact one in UTF-8 beside it. */
export function toDisposition(name: string | undefined): string {
  if (name === undefined) return 'inline';
  const plain = name.replace(/[^A-Za-z0-9 ._()-]/g, '_');
  const exact = encodeURIComponent(name.replace(/\p{Surrogate}/gu, '_')).replace(
    /['()*]/g,
    (c) => `%${c.charCodeAt(0).toString(16)}`,
  );
  return `attachment; filename="${plain}"; filename*=UTF-8''${exact}`;
}

/** Seeking in a player breaks requests off all the time. */
function isAbort(error: Error): boolean {
  return (
    'code' in error &&
    (error.code === 'ECONNABORTED' || error.code === 'EPIPE' || error.code === 'ECONNRESET')
  );
}
