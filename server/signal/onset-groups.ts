import type { OnsetFound } from './onset-search.ts';

/** Gathers onsets of all octaves and hands them on in groups that overlap in time, once nothing still to come can join. */
export class OnsetGroups {
  readonly #gap: number;
  readonly #longest: number;
  #waiting: OnsetFound[] = [];

  /**
   * @param gap samples between what is not of one group.
   * @param longest samples after which a group is cut.
   */
  constructor(gap: number, longest: number) {
    this.#gap = gap;
    this.#longest = longest;
  }

  add(found: readonly OnsetFound[]): void {
    this.#waiting.push(...found);
  }

  /** Where the earliest one waiting begins. */
  get earliestSample(): number {
    return this.#waiting.reduce(
      (least, { startSample, sample }) => Math.min(least, startSample, sample),
      Infinity,
    );
  }

  /** @param decidedSample nothing that is still to come begins before it. */
  take(decidedSample: number): OnsetFound[][] {
    this.#waiting.sort((a, b) => beginOf(a) - beginOf(b) || a.lowHz - b.lowHz);
    const groups: OnsetFound[][] = [];
    while (this.#waiting.length > 0) {
      const { count, endSample } = this.#groupLength();
      const overdue = decidedSample - beginOf(this.#waiting[0]) > this.#longest;
      if (endSample + this.#gap > decidedSample && !overdue) break;
      groups.push(this.#waiting.splice(0, count));
    }
    return groups;
  }

  #groupLength(): { count: number; endSample: number } {
    let endSample = this.#waiting[0]?.endSample ?? 0;
    let count = 1;
    for (; count < this.#waiting.length; count++) {
      const next = this.#waiting[count];
      if (!next || beginOf(next) > endSample + this.#gap) break;
      endSample = Math.max(endSample, next.endSample);
    }
    return { count, endSample };
  }
}

function beginOf(found: OnsetFound | undefined): number {
  return found ? Math.min(found.startSample, found.sample) : Infinity;
}
