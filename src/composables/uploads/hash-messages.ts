export type HashAnswer = { sha256: string } | { failed: true };
