import type { DemoRecordingSpec } from './demo-recording-spec.ts';
import { doubtfulRecordings } from './doubtful-recordings.ts';
import { metalRecordings } from './metal-recordings.ts';
import { waterRecordings } from './water-recordings.ts';

/** Every recording of the demo, found by its `key`; about 49 million samples and 125 MB in all. */
export const demoRecordings: DemoRecordingSpec[] = [
  ...waterRecordings,
  ...metalRecordings,
  ...doubtfulRecordings,
];
