import { pino, type DestinationStream, type Logger } from 'pino';

export type { Logger } from 'pino';

const secretPaths = ['authorization', 'cookie', 'password', 'token', 'link', 'req.headers', 'res.headers'];

/** JSON lines on standard output, secrets hidden, control and direction characters escaped. */
export function createLog(level: string, destination?: DestinationStream): Logger {
  const options = {
    level,
    base: null,
    timestamp: () => `,"time":"${new Date().toISOString()}"`,
    redact: { paths: [...secretPaths, ...secretPaths.map((path) => `*.${path}`)], censor: '[hidden]' },
    hooks: { streamWrite: escapeUnseen },
  };
  return destination === undefined ? pino(options) : pino(options, destination);
}

/** JSON leaves characters alone that a terminal obeys: C1 controls, line separators, direction marks. */
function escapeUnseen(line: string): string {
  return line.replace(
    /[\u007f-\u009f\u200e\u200f\u2028-\u202e\u2066-\u2069]/g,
    (character) => `\\u${character.charCodeAt(0).toString(16).padStart(4, '0')}`,
  );
}
