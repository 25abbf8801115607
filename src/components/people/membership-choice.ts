import type { LabRole, Membership, ServiceRole } from '@shared/contract/people.ts';
import type { Lab } from '@shared/contract/labs.ts';
import type { ChoiceOption } from '@/components/app/choice-option.ts';

export const serviceRoleOptions: readonly ChoiceOption<ServiceRole>[] = [
  { value: 'labeler', label: 'Labeler', hint: 'Marks events in the recordings assigned to them.' },
  {
    value: 'curator',
    label: 'Curator',
    hint: 'Assigns passes, settles disagreements, builds and publishes releases.',
  },
  { value: 'administrator', label: 'Administrator', hint: 'People, labs and the audit log; no held audio.' },
];

const labRoles: readonly { role: LabRole; label: string }[] = [
  { role: 'contributor', label: 'contributor' },
  { role: 'reviewer', label: 'reviewer' },
];

export function membershipToText(membership: Membership): string {
  return `${membership.role} ${membership.labId}`;
}

export function textToMembership(text: string): Membership {
  const [role, labId = ''] = text.split(' ');
  return { role: role === 'reviewer' ? 'reviewer' : 'contributor', labId };
}

/** Every role in every lab, as a group of checkboxes takes them. */
export function membershipOptions(labs: readonly Lab[]): ChoiceOption[] {
  return labs.flatMap((lab) =>
    labRoles.map(({ role, label }) => ({
      value: membershipToText({ role, labId: lab.id }),
      label: `${lab.name}: ${label}`,
    })),
  );
}
