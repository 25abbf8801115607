import type { LabRole, ServiceRole } from '../../../shared/contract/people.ts';

/** Invented labs. */
export const demoLabs = {
  northlight: 'Northlight Solidification Lab',
  brineworks: 'Brineworks Casting Institute',
} as const;
export type DemoLab = keyof typeof demoLabs;

interface DemoPerson {
  name: string;
  roles?: ServiceRole[];
  labs?: [DemoLab, LabRole][];
}

/** Invented people; the key is the part of the address before `@demo.example`. */
export const demoPeople = {
  administrator: { name: 'Maren Oduya', roles: ['administrator'] },
  contributor: { name: 'Tomasz Brandvold', labs: [['northlight', 'contributor']] },
  contributor2: { name: 'Leocadia Finnigan', labs: [['brineworks', 'contributor']] },
  reviewer: {
    name: 'Haruko Estevez',
    labs: [
      ['northlight', 'reviewer'],
      ['brineworks', 'reviewer'],
    ],
  },
  labeler: { name: 'Ilse Marwick', roles: ['labeler'] },
  labeler2: { name: 'Ruben Achterberg', roles: ['labeler'] },
  curator: { name: 'Anselm Varga', roles: ['curator'] },
  curator2: { name: 'Pilar Nwosu', roles: ['curator'] },
} as const satisfies Record<string, DemoPerson>;
export type DemoPersonKey = keyof typeof demoPeople;

export function demoEmail(key: DemoPersonKey): string {
  return `${key}@demo.example`;
}
