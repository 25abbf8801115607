/**
 * Keeps the answers that were used last. Whoever asks while an answer is being made waits for the same one; what fails is
 * forgotten.
 *
 * @param most answers kept.
 */
export function keptWhileUsed<Answer>(
  most: number,
): (key: string, make: () => Promise<Answer>) => Promise<Answer> {
  const kept = new Map<string, Promise<Answer>>();

  return (key, make) => {
    const answer = kept.get(key) ?? make();
    // Moved to the end: the order of the map is the order of use.
    kept.delete(key);
    kept.set(key, answer);
    answer.catch(() => {
      if (kept.get(key) === answer) kept.delete(key);
    });
    const [oldest] = kept.keys();
    if (kept.size > most && oldest !== undefined) kept.delete(oldest);
    return answer;
  };
}
