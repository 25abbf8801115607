/** Samples `[startSample, endSample)` of a recording. */
export interface Span {
  startSample: number;
  endSample: number;
}

const MAXIMUM_PLACES = 50;

/** The first places where something was found; the count goes on when the list is full. */
export class PlaceList {
  readonly spans: Span[] = [];
  count = 0;

  add(span: Span): void {
    this.count++;
    if (this.spans.length < MAXIMUM_PLACES) this.spans.push(span);
  }
}
