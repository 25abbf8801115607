import { readFileSync } from 'node:fs';
import { join } from 'node:path';
import { z } from 'zod';
import type { RowFamily } from '../kit/bench.ts';
import { megabytes, seconds, times } from '../kit/figures.ts';
import { requirePeer, runPeer } from '../kit/peer.ts';
import { compiledFile } from '../kit/places.ts';
import { runNode, type ProgramResult } from '../kit/programs.ts';
import { alternate, medianOf, ratiosOf } from '../kit/ratios.ts';
import { ultrasonicRecording } from '../kit/recordings.ts';

const LEAST = 1.2;
/** The peer holds the whole recording in memory, several times in float64. */
const SEGMENTS = { quick: 1, full: 2 };
const listSchema = z.array(z.tuple([z.number(), z.number(), z.number()]));

export const events: RowFamily = {
  name: 'events',
  about: 'events by STA/LTA and AIC as a stream against numpy',
  async run(bench) {
    await requirePeer(bench);
    const { path } = ultrasonicRecording(bench, bench.isQuick ? SEGMENTS.quick : SEGMENTS.full);
    const [ourList, peerList] = [
      join(bench.folder, 'our-events.json'),
      join(bench.folder, 'peer-events.json'),
    ];
    const runs = await alternate(bench.pairs, {
      peer: () => runPeer(bench, 'peer/events.py', [path, peerList]),
      ours: () => runNode(bench, compiledFile('programs/stream-events'), [path, ourList]),
    });
    const ratio = ratiosOf(wall(runs.peer), wall(runs.ours));
    const lists = compareLists(readList(ourList), readList(peerList));
    return [
      {
        what: 'events by STA/LTA and AIC as a stream against numpy, wall',
        ours: `${seconds(wall(runs.ours))}, ${megabytes(peak(runs.ours))}`,
        peer: `${seconds(wall(runs.peer))}, ${megabytes(peak(runs.peer))}`,
        ratio: times(ratio),
        must: `${LEAST} x`,
        reachable: '3 x, 53 MB',
        holds: ratio.median >= LEAST,
      },
      {
        what: 'their lists: events that are in one of them alone',
        ours: `${lists.ours} of ${lists.all}`,
        peer: `${lists.peer} of ${lists.all}`,
        must: '0',
        holds: lists.ours + lists.peer === 0 && lists.all > 0,
      },
    ];
  },
};

const wall = (results: ProgramResult[]) => results.map(({ wallS }) => wallS);
const peak = (results: ProgramResult[]) => medianOf(results.map(({ peakMb }) => peakMb));

/** Trigger, end and onset of every event, each as a text. */
function readList(path: string): Set<string> {
  return new Set(listSchema.parse(JSON.parse(readFileSync(path, 'utf8'))).map((event) => event.join('/')));
}

function compareLists(ours: Set<string>, peer: Set<string>) {
  const missing = (from: Set<string>, list: Set<string>) =>
    [...list].filter((event) => !from.has(event)).length;
  return { ours: missing(peer, ours), peer: missing(ours, peer), all: new Set([...ours, ...peer]).size };
}
