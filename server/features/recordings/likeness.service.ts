import { setImmediate as nextTurn } from 'node:timers/promises';
import { visibleRecordings } from '../../authorize/visible-recordings.ts';
import type { Reader, Tx } from '../../db/client.ts';
import type { Ground } from '../../ground.ts';
import type { MeasureResult } from '../../measuring/join-segments.ts';
import { FINGERPRINT_STEP_S, type Fingerprint } from '../../signal/fingerprint.ts';
import { matchWords, searchedKeys, storedKeys } from '../../signal/fingerprint-match.ts';
import { createActorsService } from '../people/actors.service.ts';
import {
  insertLikenesses,
  insertSoundKeys,
  insertSounds,
  selectByKeys,
  selectSameFiles,
  selectSameSamples,
  selectVisibleIds,
  selectWords,
  type LikenessRow,
  type SoundRow,
} from './likeness.queries.ts';
import type { RecordingRow } from './recordings.queries.ts';
import type { NewFinding } from './recordings.service.ts';

export type LikenessService = ReturnType<typeof createLikenessService>;
type Measured = Pick<MeasureResult, 'summary' | 'fingerprints'>;

/** Of more channels the fingerprints are neither indexed nor searched; their samples are compared all the same. */
const mostFingerprints = 8;
const keysAtOnce = 200;
/** Recordings whose whole fingerprint is compared with that of a channel. */
const mostCompared = 50;

/** Finds recordings that hold the same sound, whoever brought them in and whatever file they came in. */
export function createLikenessService({ db, clock }: Pick<Ground, 'db' | 'clock'>) {
  const actors = createActorsService({ db, clock });

  /** From now on, others find this recording. */
  function remember(tx: Tx, recordingId: string, measured: Measured): void {
    const sounds = soundsOf(recordingId, measured);
    insertSounds(tx, sounds);
    for (const { channel } of sounds.slice(0, mostFingerprints)) {
      const keys = storedKeys(measured.fingerprints[channel]!);
      insertSoundKeys(
        tx,
        keys.map((key) => ({ ...key, recordingId, channel })),
      );
    }
  }

  /** Every other recording once, by the strongest likeness; others are answered in between. */
  async function search(recordingId: string, measured: Measured): Promise<LikenessRow[]> {
    const sounds = soundsOf(recordingId, measured);
    const same = [...sameFiles(recordingId), ...sameSamples(recordingId, sounds)];
    const similar: LikenessRow[] = [];
    for (const { channel } of sounds.slice(0, mostFingerprints)) {
      similar.push(...(await similarTo(recordingId, channel, measured.fingerprints[channel]!)));
    }
    const strongest = new Map([...same, ...similar].reverse().map((row) => [row.otherId, row]));
    return [...strongest.values()];
  }

  function sameFiles(recordingId: string): LikenessRow[] {
    return selectSameFiles(db, recordingId).map(({ otherId }) => ({
      ...{ recordingId, otherId, kind: 'same-file' },
      ...{ channel: 0, otherChannel: 0, offsetS: 0 },
    }));
  }

  function sameSamples(recordingId: string, sounds: readonly SoundRow[]): LikenessRow[] {
    const hashes = sounds.map(({ pcmSha256 }) => pcmSha256);
    return selectSameSamples(db, recordingId, hashes).map(({ otherId, otherChannel, pcmSha256 }) => ({
      ...{ recordingId, otherId, otherChannel, kind: 'same-samples', offsetS: 0 },
      channel: sounds.find((sound) => sound.pcmSha256 === pcmSha256)!.channel,
    }));
  }

  async function similarTo(
    recordingId: string,
    channel: number,
    { words, ...rest }: Fingerprint,
  ): Promise<LikenessRow[]> {
    const suggested = await suggestedOffsets(recordingId, { words, ...rest });
    const found: LikenessRow[] = [];
    for (const { otherId, otherChannel, offsets } of suggested.slice(0, mostCompared)) {
      const others = selectWords(db, otherId, otherChannel);
      const match = others && matchWords(words, toWords(others), offsets);
      await nextTurn();
      if (!match) continue;
      const offsetS = match.offset * FINGERPRINT_STEP_S;
      found.push({ recordingId, otherId, kind: 'similar', channel, otherChannel, offsetS });
    }
    return found;
  }

  /** Channels of others that share keys, those with most of them first. */
  async function suggestedOffsets(recordingId: string, fingerprint: Fingerprint) {
    const keys = searchedKeys(fingerprint);
    const suggestions = new Map<string, { otherId: string; otherChannel: number; offsets: number[] }>();
    for (let at = 0; at < keys.length; at += keysAtOnce) {
      const some = keys.slice(at, at + keysAtOnce);
      const rows = selectByKeys(
        db,
        recordingId,
        some.map(({ key }) => key),
      );
      for (const { key, otherId, otherChannel, step } of rows) {
        const name = `${otherId}/${otherChannel}`;
        const suggestion = suggestions.get(name) ?? { otherId, otherChannel, offsets: [] };
        for (const own of some) if (own.key === key) suggestion.offsets.push(step - own.step);
        suggestions.set(name, suggestion);
      }
      await nextTurn();
    }
    return [...suggestions.values()].sort((a, b) => b.offsets.length - a.offsets.length);
  }

  /** Keeps the likenesses. @returns what a reviewer has to look at, since whoever brought it in may not be told of it. */
  function record(tx: Tx, recording: RecordingRow, likenesses: readonly LikenessRow[]): NewFinding[] {
    insertLikenesses(tx, likenesses);
    const hidden = hiddenFrom(tx, recording.uploadedById, likenesses);
    const copies = hidden.filter(({ kind }) => kind !== 'similar').length;
    const similar = hidden.length - copies;
    return [
      ...(copies > 0 ? [{ kind: 'duplicate' as const, sentence: copiesSentence(copies), place: null }] : []),
      ...(similar > 0
        ? [{ kind: 'near-duplicate' as const, sentence: similarSentence(similar), place: null }]
        : []),
    ];
  }

  function hiddenFrom(tx: Reader, personId: string, likenesses: readonly LikenessRow[]): LikenessRow[] {
    const actor = actors.find(personId);
    if (!actor) return [...likenesses];
    const ids = likenesses.map(({ otherId }) => otherId);
    const visible = selectVisibleIds(tx, ids, visibleRecordings(actor));
    return likenesses.filter(({ otherId }) => !visible.has(otherId));
  }

  return { remember, search, record };
}

/** Silent channels are like all others of their length: they say nothing. */
function soundsOf(recordingId: string, { summary, fingerprints }: Measured): SoundRow[] {
  return summary.contents
    .filter(({ channel }) => summary.levels[channel]?.rmsDb !== null)
    .map(({ channel, pcmSha256 }) => {
      const { buffer, byteOffset, byteLength } = fingerprints[channel]!.words;
      return { recordingId, channel, pcmSha256, words: Buffer.from(buffer, byteOffset, byteLength) };
    });
}

function toWords(bytes: Buffer): Uint16Array {
  return Uint16Array.from({ length: bytes.length / 2 }, (_, k) => bytes.readUInt16LE(2 * k));
}

function copiesSentence(count: number): string {
  const [those, who] = count === 1 ? ['another recording', 'it'] : [`${count} other recordings`, 'them'];
  return `The same samples are stored in ${those}; whoever brought this one in may not see ${who}.`;
}

function similarSentence(count: number): string {
  const [those, who] = count === 1 ? ['another recording', 'it'] : [`${count} other recordings`, 'them'];
  return `It sounds like a copy of ${those}, or of a part: the courses of their band energies agree. Whoever brought this one in may not see ${who}.`;
}
