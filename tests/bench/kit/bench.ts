/** One line of the table. */
export interface BenchRow {
  what: string;
  ours: string;
  /** Empty where there is no peer. */
  peer?: string;
  /** Where ours is compared with something: the median over all pairs, and its range. */
  ratio?: string;
  must?: string;
  reachable?: string;
  /** Left out where nothing is asked for. */
  holds?: boolean;
}

/** What a family of rows gets to work with. */
export interface Bench {
  /** Small inputs and few runs, to see that everything works; its figures are no proof. */
  readonly isQuick: boolean;
  /** Pairs of runs, ours and the peer's, for each ratio. */
  readonly pairs: number;
  /** For inputs and results; removed at the end. */
  readonly folder: string;
  /** Tells how far it is. */
  say(line: string): void;
}

export interface RowFamily {
  /** By which it is asked for on the command line. */
  readonly name: string;
  readonly about: string;
  run(bench: Bench): Promise<BenchRow[]>;
}

/** Something that a family needs is not on this machine; the message is a sentence that names it. */
export class MissingHereError extends Error {}
