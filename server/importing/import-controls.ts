export interface ImportControls {
  /** From 0 to 1, after every block. */
  onProgress?: (fraction: number) => void;
  signal?: AbortSignal;
}
