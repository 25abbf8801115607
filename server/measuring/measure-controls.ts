export interface MeasureControls {
  /** From 0 to 1, now and then. */
  onProgress?: (fraction: number) => void;
  signal?: AbortSignal;
}
