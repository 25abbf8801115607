import type { GuardFinding } from '@shared/contract/recordings.ts';
import type { Decision, HeldRecording } from '@shared/contract/reviews.ts';
import type { ChoiceOption } from '@/components/app/choice-option.ts';
import { formatCount } from '@/composables/useFormat.ts';

interface DecisionWords {
  label: string;
  /** What it means for the recording, before it is taken. */
  meaning: string;
  confirm: string;
  /** What was done: "Cleared: film-07.wav". */
  past: string;
}

export const decisionWords: Readonly<Record<Decision, DecisionWords>> = {
  clear: {
    label: 'Clear it',
    meaning:
      'It is shared with the other labs of this service. Curators may assign it to be marked and put it into releases.',
    confirm: 'Clear and share',
    past: 'Cleared',
  },
  restrict: {
    label: 'Keep it in the lab',
    meaning:
      'Only the lab sees and hears it. It stays measured and can be worked with there, but never enters a release.',
    confirm: 'Keep it in the lab',
    past: 'Kept in the lab',
  },
  refuse: {
    label: 'Refuse it',
    meaning:
      'It is closed to everybody but its lab and marked as refused. What was stored is kept as it is, nothing is erased.',
    confirm: 'Refuse it',
    past: 'Refused',
  },
};

const decisionOrder = ['clear', 'restrict', 'refuse'] as const satisfies readonly Decision[];

/** All three, always in the same order; one that is not open to this person is shown, not hidden. */
export function decisionOptions(open: readonly Decision[]): ChoiceOption<Decision>[] {
  return decisionOrder.map((value) => {
    const isOpen = open.includes(value);
    const { label, meaning } = decisionWords[value];
    return {
      value,
      label: isOpen ? label : `${label} (not possible here)`,
      hint: meaning,
      disabled: !isOpen,
    };
  });
}

const declaredWords: Readonly<Record<string, string>> = {
  voices: 'people may be heard',
  'personal-data': 'personal data',
  'partner-agreement': 'an agreement with a partner',
  'unpublished-result': 'an unpublished result',
  other: 'something else',
};

function declaredInShort(findings: readonly GuardFinding[]): string {
  const kinds = findings.map(({ place, sentence }) => declaredWords[place ?? ''] ?? sentence);
  return `declared: ${kinds.join(', ')}`;
}

/** Why a recording is held, in one line of a table. */
export function findingsInShort(findings: readonly GuardFinding[]): string {
  const ofKind = (kind: GuardFinding['kind']) => findings.filter((finding) => finding.kind === kind);
  const [declared, metadata, voices] = [
    ofKind('declared-sensitivity'),
    ofKind('personal-metadata'),
    ofKind('voice-marked'),
  ];
  const copies = [...ofKind('duplicate'), ...ofKind('near-duplicate')];
  const parts = [
    declared.length > 0 ? declaredInShort(declared) : '',
    metadata.length > 0
      ? `${formatCount(metadata.length, 'field')} in the file could name a person or a place`
      : '',
    voices.length > 0 ? formatCount(voices.length, 'marked voice') : '',
    ofKind('speech').length > 0 ? 'there may be speech' : '',
    copies.length > 0 ? 'the same sound is stored elsewhere' : '',
  ].filter(Boolean);
  if (parts.length === 0) return 'no finding is left';
  const line = parts.join('; ');
  return line.charAt(0).toUpperCase() + line.slice(1);
}

/** The oldest one that this person may decide on, other than the one just looked at. */
export function nextToDecide(
  held: readonly HeldRecording[],
  besides: string | null = null,
): HeldRecording | null {
  return held.find((item) => item.decisions.length > 0 && item.recordingId !== besides) ?? null;
}
