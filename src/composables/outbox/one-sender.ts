/**
 * Lets one window of this browser at a time send the marks of a person. Where the browser has no locks, two windows may send
 * the same: each request is safe to repeat, so that costs requests and nothing else.
 */
export async function oneSender(personId: string, work: () => Promise<void>): Promise<void> {
  const locks = (navigator as Partial<Navigator>).locks;
  if (!locks) return work();
  await locks.request(`recalesce-outbox-${personId}`, work);
}
