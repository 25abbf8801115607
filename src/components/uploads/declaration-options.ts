import type { Licence } from '@shared/contract/licence.ts';
import { licenceSchema } from '@shared/contract/licence.ts';
import type { Sensitivity } from '@shared/contract/recordings.ts';
import type { ChoiceOption } from '@/components/app/choice-option.ts';

const licenceNames: Readonly<Record<Licence, string>> = {
  'CC-BY-4.0': 'CC BY 4.0: others may use it and name you',
  'CC0-1.0': 'CC0 1.0: others may use it without conditions',
  'CC-BY-SA-4.0': 'CC BY-SA 4.0: as CC BY, what is made of it under the same terms',
  'CC-BY-NC-4.0': 'CC BY-NC 4.0: as CC BY, not for commercial use',
  'ODC-By-1.0': 'ODC-By 1.0: for data, others may use it and name you',
  'ODbL-1.0': 'ODbL 1.0: for data, what is made of it under the same terms',
};

export const licenceOptions: readonly ChoiceOption<Licence>[] = licenceSchema.options.map((value) => ({
  value,
  label: licenceNames[value],
}));

export const sensitivityOptions: readonly ChoiceOption<Sensitivity>[] = [
  {
    value: 'voices',
    label: 'People may be heard',
    hint: 'A word in the background is enough. A reviewer listens before anything is shared.',
  },
  { value: 'personal-data', label: 'It holds personal data', hint: 'Names, places, times of work.' },
  {
    value: 'partner-agreement',
    label: 'An agreement with a partner covers it',
    hint: 'For example a composition that is not public.',
  },
  { value: 'unpublished-result', label: 'It shows a result that is not published yet' },
  { value: 'other', label: 'Something else', hint: 'Say what in the note.' },
];
