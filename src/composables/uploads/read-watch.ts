/** How whoever waits for a file to be read hears of it, and gives up. */
export interface ReadWatch {
  signal?: AbortSignal;
  /** How much of the sound of a film is taken out, from 0 to 1. */
  onShare?: (share: number) => void;
}
