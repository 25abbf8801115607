import type { RowFamily } from './kit/bench.ts';
import { accuracy } from './rows/accuracy.ts';
import { archive } from './rows/archive.ts';
import { bandwidth } from './rows/bandwidth.ts';
import { candidates } from './rows/candidates.ts';
import { colours } from './rows/colours.ts';
import { database } from './rows/database.ts';
import { decode } from './rows/decode.ts';
import { detector } from './rows/detector.ts';
import { events } from './rows/events.ts';
import { features } from './rows/features.ts';
import { growth } from './rows/growth.ts';
import { marking } from './rows/marking.ts';
import { memory } from './rows/memory.ts';
import { meyda } from './rows/meyda.ts';
import { picture } from './rows/picture.ts';
import { rounds } from './rows/rounds.ts';
import { saving } from './rows/saving.ts';
import { server } from './rows/server.ts';
import { shapes } from './rows/shapes.ts';
import { sparse } from './rows/sparse.ts';
import { views } from './rows/views.ts';

/** All rows, in the order of the table. */
export const families: readonly RowFamily[] = [
  features,
  memory,
  growth,
  meyda,
  events,
  accuracy,
  views,
  colours,
  archive,
  database,
  candidates,
  marking,
  picture,
  decode,
  shapes,
  sparse,
  rounds,
  server,
  saving,
  detector,
  bandwidth,
];
