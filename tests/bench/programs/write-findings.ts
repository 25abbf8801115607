/** Hands what a program found to the bench that started it. */
export function writeFindings(findings: unknown): void {
  process.stdout.write(JSON.stringify(findings));
}

/** CPU microseconds of all threads that some work takes. */
export async function cpuOf(work: () => unknown): Promise<number> {
  const before = process.cpuUsage();
  await work();
  const { user, system } = process.cpuUsage(before);
  return user + system;
}
