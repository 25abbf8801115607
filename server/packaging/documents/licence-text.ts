import type { ReleaseSnapshot } from '../../../shared/contract/release-snapshot.ts';
import { licenceIds, licences, type LicenceId } from '../../../shared/domain/licence-mix.ts';
import { oneLine } from '../cells.ts';

/**
 * The statement of the licence with the address of the legal text. The legal text itself is not copied: only the
 * licensor's own copy binds.
 */
export function licenceDocument(snapshot: ReleaseSnapshot): Buffer {
  const present = licenceIds.filter((id) =>
    snapshot.recordings.some((recording) => recording.licence === id),
  );
  const others = present.filter((id) => id !== snapshot.licence);
  const parts = [
    `${oneLine(snapshot.collection.title)}, version ${snapshot.version}`,
    `This data set as a whole is given under the licence ${statement(snapshot.licence)}`,
    'The address above leads to the legal text, which alone binds; the summary explains it and replaces nothing.',
    memberStatement(snapshot.licence, others),
  ];
  return Buffer.from(`${parts.join('\n\n')}\n`, 'utf8');
}

function statement(id: LicenceId): string {
  const { title, legalTextUrl, summary } = licences[id];
  return [`${title}`, `SPDX-License-Identifier: ${id}`, legalTextUrl, '', summary].join('\n');
}

function memberStatement(whole: LicenceId, others: LicenceId[]): string {
  if (others.length === 0)
    return `Each recording is given by its lab under ${whole} as well; see the column licence of metadata.csv.`;
  const head =
    'Single recordings were given by their labs under the following licences; the column licence of metadata.csv says which recording carries which.';
  return [head, ...others.map(statement)].join('\n\n');
}
