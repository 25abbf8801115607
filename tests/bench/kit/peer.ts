import { MissingHereError, type Bench } from './bench.ts';
import { sourceFile } from './places.ts';
import { runProgram, type ProgramResult } from './programs.ts';

/** One thread, since more cost CPU and gain little; the allocator as it comes. */
const ENVIRONMENT = { OPENBLAS_NUM_THREADS: '1', PYTHONDONTWRITEBYTECODE: '1' };
/** An allocator that keeps what it was given back: a fifth of the time goes into pages that are returned and asked for again. */
const KEEPING_PAGES = { MALLOC_MMAP_THRESHOLD_: '1000000000', MALLOC_TRIM_THRESHOLD_: '1000000000' };
const VERSIONS =
  'import platform, numpy, scipy; print(f"Python {platform.python_version()}, numpy {numpy.__version__}, scipy {scipy.__version__}")';

/** @returns `null` where there is no Python with both packages. */
export async function peerVersions(bench: Bench): Promise<string | null> {
  try {
    return (await runProgram(bench, 'python3', ['-c', VERSIONS])).output.trim();
  } catch {
    return null;
  }
}

/** @throws MissingHereError where there is no Python with both packages. */
export async function requirePeer(bench: Bench): Promise<void> {
  if ((await peerVersions(bench)) !== null) return;
  throw new MissingHereError('python3 with numpy and scipy is not here');
}

/** @param script in the folder of this bench, such as `peer/features.py`. */
export function runPeer(
  bench: Bench,
  script: string,
  argumentList: readonly string[],
  { keepsPages = false } = {},
): Promise<ProgramResult> {
  const environment = keepsPages ? { ...ENVIRONMENT, ...KEEPING_PAGES } : ENVIRONMENT;
  return runProgram(bench, 'python3', [sourceFile(script), ...argumentList], { environment });
}
