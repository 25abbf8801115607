/** Orders texts by their UTF-8 bytes: the same in every locale, and the order `LC_ALL=C sort` gives. */
export function compareBytes(a: string, b: string): number {
  return Buffer.compare(Buffer.from(a, 'utf8'), Buffer.from(b, 'utf8'));
}

/** Orders keys part by part, numbers by value and texts by bytes. */
export function compareKeys(a: readonly (string | number)[], b: readonly (string | number)[]): number {
  for (const [index, left] of a.entries()) {
    const right = b[index];
    if (right === undefined) return 1;
    const order =
      typeof left === 'number' && typeof right === 'number'
        ? left - right
        : compareBytes(String(left), String(right));
    if (order !== 0) return order;
  }
  return a.length - b.length;
}
