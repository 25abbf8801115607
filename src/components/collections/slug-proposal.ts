import { splitWordIn } from '@shared/domain/split-word.ts';

const longestSlug = 60;

/** A short name made of a title: plain letters and digits, without words that loaders read as the name of a split. */
export function proposeSlug(title: string): string {
  const words = title
    .normalize('NFKD')
    .replace(/\p{M}/gu, '')
    .toLowerCase()
    .split(/[^a-z0-9]+/)
    .filter((word) => word !== '' && splitWordIn(word) === null);
  return words.join('-').slice(0, longestSlug).replace(/-$/, '');
}
