import { describe, expect, it } from 'vitest';
import type { GuardFinding } from '@shared/contract/recordings.ts';
import type { HeldRecording } from '@shared/contract/reviews.ts';
import { decidedTitle, readDecidedNote } from '@/components/reviews/decided-note.ts';
import { decisionOptions, findingsInShort, nextToDecide } from '@/components/reviews/decision-words.ts';

function finding(kind: GuardFinding['kind'], place: string | null): GuardFinding {
  return {
    id: `${kind}/${place}`,
    kind,
    place,
    sentence: 'Said in full.',
    foundAt: '2026-12-01T08:00:00.000Z',
  };
}

function held(recordingId: string, decisions: HeldRecording['decisions']): HeldRecording {
  return {
    recordingId,
    fileName: `${recordingId}.wav`,
    runTitle: 'Film 07',
    labId: 'lab',
    labName: 'Northlight',
    uploadedByName: 'Tomasz Brandvold',
    uploadedByMe: decisions.length === 0,
    heldAt: '2026-12-01T08:00:00.000Z',
    findings: [],
    decisions,
    limits: null,
  };
}

describe('findings in one line', () => {
  it('name what was declared and count what the screen found', () => {
    const findings = [
      finding('declared-sensitivity', 'voices'),
      finding('declared-sensitivity', 'partner-agreement'),
      finding('personal-metadata', 'bext/Originator'),
    ];
    const line = findingsInShort(findings).replace(/\u00A0/g, ' ');
    expect(line).toBe(
      'Declared: people may be heard, an agreement with a partner; 1 field in the file could name a person or a place',
    );
  });

  it('say where a voice was marked', () => {
    expect(findingsInShort([finding('voice-marked', '12.5 s')]).replace(/\u00A0/g, ' ')).toBe(
      '1 marked voice',
    );
  });

  it('give the whole sentence for a declaration that has no short word', () => {
    expect(findingsInShort([finding('declared-sensitivity', null)])).toBe('Declared: Said in full.');
  });
});

describe('the decisions', () => {
  it('are always three, and those not open are shown as closed', () => {
    const options = decisionOptions(['restrict', 'refuse']);
    expect(options.map(({ value, disabled }) => [value, disabled])).toEqual([
      ['clear', true],
      ['restrict', false],
      ['refuse', false],
    ]);
    expect(options[0]?.label).toContain('not possible here');
    expect(options.every(({ hint }) => hint?.endsWith('.'))).toBe(true);
  });
});

describe('the next one to decide', () => {
  it('is the oldest that this person may decide on, other than the one at hand', () => {
    const list = [held('own', []), held('first', ['clear']), held('second', ['clear'])];
    expect(nextToDecide(list)?.recordingId).toBe('first');
    expect(nextToDecide(list, 'first')?.recordingId).toBe('second');
    expect(nextToDecide([held('own', [])])).toBeNull();
  });
});

describe('the note of a decision', () => {
  it('is read from the entry of the history and from nothing else', () => {
    const note = readDecidedNote({ back: '/', decided: { fileName: 'film.wav', decision: 'restrict' } });
    expect(note && decidedTitle(note)).toBe('Kept in the lab: film.wav');
    expect(readDecidedNote({ decided: { fileName: 'film.wav', decision: 'burn' } })).toBeNull();
    expect(readDecidedNote(null)).toBeNull();
  });
});
