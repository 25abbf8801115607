/**
 * Lets one window of this browser at a time send what waits of a person. Where the browser has no locks, two windows may send
 * the same: each request is safe to repeat, so that costs requests and nothing else.
 */
export async function oneSender(
  personId: string,
  work: () => Promise<void>,
  name = 'recalesce-outbox',
): Promise<void> {
  const locks = (navigator as Partial<Navigator>).locks;
  if (!locks) return work();
  await locks.request(`${name}-${personId}`, work);
}
