import { UNREAD_KEY, type MetadataField } from './metadata-field.ts';

/** Why a field could point to a person or a place. */
export type PersonalKind = 'person' | 'place' | 'free-text' | 'unread';

export type PersonalFinding = MetadataField & { kind: PersonalKind; sentence: string };

type Rule = { kind: PersonalKind; what: string };

const INFO_RULES: Record<string, Rule> = {
  IART: { kind: 'person', what: 'the artist' },
  IENG: { kind: 'person', what: 'the engineer' },
  ITCH: { kind: 'person', what: 'the technician' },
  ICMS: { kind: 'person', what: 'who commissioned it' },
  ISRC: { kind: 'person', what: 'the source' },
  ICOP: { kind: 'person', what: 'the holder of the copyright' },
  IWRI: { kind: 'person', what: 'the writer' },
  IPRO: { kind: 'person', what: 'the producer' },
  ISTR: { kind: 'person', what: 'the performer' },
  IARL: { kind: 'place', what: 'where it is kept' },
  ICMT: { kind: 'free-text', what: 'a comment' },
  ISBJ: { kind: 'free-text', what: 'the subject' },
  INAM: { kind: 'free-text', what: 'a title' },
  IKEY: { kind: 'free-text', what: 'keywords' },
};

const BEXT_RULES: Record<string, Rule> = {
  Originator: { kind: 'person', what: 'the originator' },
  OriginatorReference: { kind: 'person', what: 'the reference of the originator' },
  Description: { kind: 'free-text', what: 'a description' },
};

/** iXML, guan and the comments of FLAC: the first pattern that fits the key decides. */
const KEY_RULES: [pattern: RegExp, rule: Rule][] = [
  [
    /GPS|LATITUDE|LONGITUDE|ALTITUDE|LOCATION|^LOC |ADDRESS|COUNTRY|CITY/i,
    { kind: 'place', what: 'a place' },
  ],
  [
    /ORIGINATOR|USER|OPERATOR|MIXER|AUTHOR|OWNER|PERSON|SURVEYOR|OBSERVER|ARTIST|PERFORMER|COMPOSER|ENGINEER|CONTACT|ORGANI[SZ]ATION|COPYRIGHT|ENCODED.?BY/i,
    { kind: 'person', what: 'a person' },
  ],
  [
    /NOTE|DESCRIPTION|COMMENT|PROJECT|SCENE|TITLE|ALBUM|TRACK\/NAME/i,
    { kind: 'free-text', what: 'a free text' },
  ],
];

/** Texts of cues that only count or name the kind of mark. */
const PLAIN_MARK =
  /^(marker|mark|cue|region|point|track|take|start|end|loop|event|slate|m|r)?[\s_#.:-]*\d*$/i;

/** Signs of a person or a place in any text at all, whatever its field is for. */
const CONTENT_RULES: [pattern: RegExp, rule: Rule][] = [
  [/[^\s@]{1,64}@[^\s@]{1,64}\.[a-z]{2,24}/i, { kind: 'person', what: 'an e-mail address' }],
  [
    /(\/Users\/|\/home\/|[A-Z]:\\Users\\)[^\s/\\]/i,
    { kind: 'person', what: 'a path with the name of an account' },
  ],
  [/-?\d{1,2}\.\d{4,}\s*[,; ]\s*-?\d{1,3}\.\d{4,}/, { kind: 'place', what: 'coordinates' }],
];

const UNREAD_RULES: Record<string, string> = {
  id3: 'a tag that often names people',
  ID3: 'a tag that often names people',
  _PMX: 'a description that often names people, programs and paths',
  axml: 'a description that often names people and programmes',
  cart: 'a label of a radio station that often names people',
  afsp: 'a text that often names the account and the program',
  wamd: 'notes of a field recorder, often with the place',
  exif: 'notes of a camera, often with the place',
  PICTURE: 'a picture that can show people or a place',
  APPLICATION: 'notes of a program',
  header: 'of which nobody here knows what it says',
};

/**
 * The fields that could name a person or a place, each with a sentence for the person who decides. Meant to miss little: a free
 * text counts as one that could. Empty fields, dates, program names and plain technical values do not.
 */
export function personalMetadata(fields: MetadataField[]): PersonalFinding[] {
  return fields.flatMap((field) => {
    const rule = ruleFor(field);
    return rule ? [{ ...field, kind: rule.kind, sentence: sentenceFor(field, rule) }] : [];
  });
}

function ruleFor(field: MetadataField): Rule | undefined {
  if (field.value.trim() === '') return undefined;
  if (field.key === UNREAD_KEY) return unreadRule(field);
  return fieldRule(field) ?? CONTENT_RULES.find(([pattern]) => pattern.test(field.value))?.[1];
}

function unreadRule({ chunk }: MetadataField): Rule | undefined {
  const known = UNREAD_RULES[chunk];
  if (known) return { kind: 'unread', what: known };
  const isCutText =
    chunk === 'bext' ||
    chunk === 'iXML' ||
    chunk === 'guan' ||
    chunk === 'Vorbis' ||
    chunk.startsWith('LIST');
  return isCutText ? { kind: 'unread', what: 'a text too long to be read whole' } : undefined;
}

function fieldRule({ chunk, key, value }: MetadataField): Rule | undefined {
  if (chunk === 'INFO') return INFO_RULES[key];
  if (chunk === 'bext') return BEXT_RULES[key];
  if (chunk === 'iXML' || chunk === 'guan' || chunk === 'Vorbis')
    return KEY_RULES.find(([pattern]) => pattern.test(key))?.[1];
  if (chunk === 'CSV') return tableLineRule(value);
  const isCueText = chunk === 'adtl' && !PLAIN_MARK.test(value);
  return isCueText ? { kind: 'free-text', what: 'the text of a mark' } : undefined;
}

/** A line above the numbers: its first words say what it is about; a line of words alone could be about anything. */
function tableLineRule(line: string): Rule | undefined {
  const known = KEY_RULES.find(([pattern]) => pattern.test(line))?.[1];
  if (known) return known;
  return /\p{L}{2,}\s+\p{L}{2,}/u.test(line) ? { kind: 'free-text', what: 'a line of words' } : undefined;
}

function sentenceFor({ chunk, key, value }: MetadataField, { kind, what }: Rule): string {
  if (kind === 'unread')
    return `The file carries a chunk "${chunk}" (${value}), ${what}; its content was not read.`;
  const shown = value.length > 120 ? `${value.slice(0, 119)}…` : value;
  const could = { person: 'name a person', place: 'name a place', 'free-text': 'name a person or a place' }[
    kind
  ];
  return `The field ${key} of the chunk ${chunk} holds ${what}, which could ${could}: "${shown}".`;
}
