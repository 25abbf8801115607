import type { Bench } from './bench.ts';
import { sourceFile } from './places.ts';
import { runNode } from './programs.ts';

/** What a benchmark that stands for itself prints. @param name of its file. */
export async function linesOf(
  bench: Bench,
  name: string,
  argumentList: readonly string[] = [],
): Promise<string[]> {
  const { output } = await runNode(bench, sourceFile(name), argumentList, {
    nodeArguments: ['--import', 'tsx'],
  });
  return output.split('\n').filter((line) => line.trim() !== '');
}

/** The number in the first group; NaN where the line has none. */
export function numberAfter(line: string, word: RegExp): number {
  return Number(word.exec(line)?.[1] ?? Number.NaN);
}
