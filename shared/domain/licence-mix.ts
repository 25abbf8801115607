/** Licences a recording or a whole release may carry, by SPDX id, with the address of the licence itself. */
export const licences = {
  'CC0-1.0': {
    title: 'Creative Commons Zero v1.0 Universal',
    url: 'https://creativecommons.org/publicdomain/zero/1.0/',
    legalTextUrl: 'https://creativecommons.org/publicdomain/zero/1.0/legalcode',
    summary:
      'The rights holders have waived their rights as far as the law allows. The data may be used for any purpose without asking. Credit is not required, but asked for.',
  },
  'CC-BY-4.0': {
    title: 'Creative Commons Attribution 4.0 International',
    url: 'https://creativecommons.org/licenses/by/4.0/',
    legalTextUrl: 'https://creativecommons.org/licenses/by/4.0/legalcode',
    summary:
      'The data may be copied, changed and passed on for any purpose, also commercially, as long as credit is given, the licence is named and changes are stated.',
  },
  'CC-BY-SA-4.0': {
    title: 'Creative Commons Attribution Share Alike 4.0 International',
    url: 'https://creativecommons.org/licenses/by-sa/4.0/',
    legalTextUrl: 'https://creativecommons.org/licenses/by-sa/4.0/legalcode',
    summary:
      'The data may be copied, changed and passed on for any purpose, also commercially, as long as credit is given and what is made from it carries the same licence.',
  },
  'CC-BY-NC-4.0': {
    title: 'Creative Commons Attribution Non Commercial 4.0 International',
    url: 'https://creativecommons.org/licenses/by-nc/4.0/',
    legalTextUrl: 'https://creativecommons.org/licenses/by-nc/4.0/legalcode',
    summary:
      'The data may be copied, changed and passed on for purposes that are not commercial, as long as credit is given. This is not an open licence in the sense of the Open Definition.',
  },
  'ODC-By-1.0': {
    title: 'Open Data Commons Attribution License v1.0',
    url: 'https://opendatacommons.org/licenses/by/1-0/',
    legalTextUrl: 'https://opendatacommons.org/licenses/by/1-0/',
    summary:
      'The database may be copied, changed and passed on for any purpose, as long as it is attributed and this licence is named.',
  },
  'ODbL-1.0': {
    title: 'Open Data Commons Open Database License v1.0',
    url: 'https://opendatacommons.org/licenses/odbl/1-0/',
    legalTextUrl: 'https://opendatacommons.org/licenses/odbl/1-0/',
    summary:
      'The database may be copied, changed and passed on for any purpose, as long as it is attributed, databases made from it carry the same licence, and no technical measure takes these rights away.',
  },
} as const;

export type LicenceId = keyof typeof licences;
/** From the loosest to the most demanding. */
export const licenceIds = Object.keys(licences) as LicenceId[];

/**
 * What the whole may carry so that it is not looser than a member with this licence. Share-alike licences allow only
 * themselves; terms that attribute may be joined by further ones.
 */
const wholesFor: Record<LicenceId, readonly LicenceId[]> = {
  'CC0-1.0': licenceIds,
  'CC-BY-4.0': ['CC-BY-4.0', 'CC-BY-SA-4.0', 'CC-BY-NC-4.0', 'ODC-By-1.0', 'ODbL-1.0'],
  'ODC-By-1.0': ['CC-BY-4.0', 'CC-BY-SA-4.0', 'CC-BY-NC-4.0', 'ODC-By-1.0', 'ODbL-1.0'],
  'CC-BY-SA-4.0': ['CC-BY-SA-4.0'],
  'CC-BY-NC-4.0': ['CC-BY-NC-4.0'],
  'ODbL-1.0': ['ODbL-1.0'],
};

/** Licences the whole may carry with these members, loosest first; empty where the members cannot be put together. */
export function allowedWholeLicences(members: readonly LicenceId[]): LicenceId[] {
  return licenceIds.filter((whole) => members.every((member) => wholesFor[member].includes(whole)));
}

/** Why this whole cannot be given over these members, as a sentence; `null` where it can. */
export function licenceMixRefusal(members: readonly LicenceId[], whole: LicenceId): string | null {
  const allowed = allowedWholeLicences(members);
  if (allowed.includes(whole)) return null;
  if (allowed.length === 0) return impossibleMix(members);
  const stricter = licenceIds.filter((id) => members.includes(id) && !wholesFor[id].includes(whole));
  return `The release cannot carry ${whole}: it would be looser than ${joined(stricter, 'and')}, which some of its recordings carry. It can carry ${joined(allowed, 'or')}.`;
}

function impossibleMix(members: readonly LicenceId[]): string {
  const present = licenceIds.filter((id) => members.includes(id));
  const demanding = present.filter((id) => wholesFor[id].length === 1);
  return `Recordings under ${joined(demanding, 'and')} cannot go into one release: each of these licences asks that the whole carries it and no other. Leave out the recordings of one of them, or ask the lab for another licence.`;
}

function joined(ids: readonly string[], word: 'and' | 'or'): string {
  if (ids.length < 2) return ids.join('');
  return `${ids.slice(0, -1).join(', ')} ${word} ${ids.at(-1)}`;
}
