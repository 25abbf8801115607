import { compareVersions, parseVersion } from '@shared/domain/release-version.ts';

/** Why a version cannot be the next one, going on from the label; undefined where it can. */
export function versionMessage(text: string, minimum: string): string | undefined {
  const version = parseVersion(text);
  const least = parseVersion(minimum);
  if (!version) return 'is a version of the form 1.0.0';
  if (least && compareVersions(version, least) < 0) return `has to be ${minimum} or more`;
  return undefined;
}

/** The hint beside the number: the least one, and what asks for it. */
export function versionHint({
  previousVersion,
  minimumVersion,
  minimumVersionReason,
}: {
  previousVersion: string | null;
  minimumVersion: string;
  minimumVersionReason: string;
}): string {
  if (previousVersion === null) return `Nothing of it was published before. ${minimumVersionReason}`.trim();
  return `After ${previousVersion} it has to be at least ${minimumVersion}. ${minimumVersionReason}`.trim();
}
