import { mount } from '@vue/test-utils';
import { describe, expect, it } from 'vitest';
import AppCheckboxGroup from '@/components/app/AppCheckboxGroup.vue';
import AppDateTime from '@/components/app/AppDateTime.vue';
import AppInput from '@/components/app/AppInput.vue';
import AppNumber from '@/components/app/AppNumber.vue';
import AppRadioGroup from '@/components/app/AppRadioGroup.vue';
import AppSelect from '@/components/app/AppSelect.vue';
import AppTextarea from '@/components/app/AppTextarea.vue';
import { fieldSentence } from '@/components/app/field-sentence.ts';
import { fromLocalText, toLocalText } from '@/components/app/local-time.ts';
import { readTypedNumber } from '@/components/app/typed-number.ts';

const options = [
  { value: 'contact', label: 'Contact sensor' },
  { value: 'air', label: 'Airborne microphone' },
];

const words = { label: 'Gain', hint: 'As set.', error: 'is needed' };
const fields = [
  ['AppInput', () => mount(AppInput, { props: { ...words, modelValue: '' } })],
  ['a password', () => mount(AppInput, { props: { ...words, modelValue: '', type: 'password' } })],
  ['AppTextarea', () => mount(AppTextarea, { props: { ...words, modelValue: '' } })],
  ['AppNumber', () => mount(AppNumber, { props: { ...words, modelValue: null } })],
  ['AppSelect', () => mount(AppSelect, { props: { ...words, modelValue: '', options } })],
  ['AppDateTime', () => mount(AppDateTime, { props: { ...words, modelValue: null } })],
] as const;

describe.each(fields)('%s', (_, mountField) => {
  it('is named by its label and described by hint and error', () => {
    const wrapper = mountField();
    const control = wrapper.find('input, textarea, select');
    const label = wrapper.find('label');
    expect(label.attributes('for')).toBe(control.attributes('id'));
    expect(label.text()).toBe('Gain');
    const ids = control.attributes('aria-describedby')?.split(' ') ?? [];
    const texts = ids.map((id) => wrapper.find(`#${id}`).text());
    expect(texts[0]).toContain('As set.');
    expect(texts[1]).toContain('Gain is needed.');
    expect(control.attributes('aria-invalid')).toBe('true');
  });
});

describe('groups of choices', () => {
  it('are named by their legend and tie the error to the group', () => {
    const props = { legend: 'Sensitivity', options, modelValue: [], error: 'is needed' };
    const wrapper = mount(AppCheckboxGroup, { props });
    const group = wrapper.find('fieldset');
    expect(wrapper.find('legend').text()).toBe('Sensitivity');
    const id = group.attributes('aria-describedby') ?? '';
    expect(wrapper.find(`#${id}`).text()).toContain('Sensitivity is needed.');
  });

  it('give the chosen values in a list', async () => {
    const props = { legend: 'Sensitivity', options, modelValue: ['air'] };
    const wrapper = mount(AppCheckboxGroup, { props });
    await wrapper.find('input[value="contact"]').setValue(true);
    expect(wrapper.emitted('update:modelValue')).toEqual([[['air', 'contact']]]);
  });

  it('share one name where only one can be chosen', async () => {
    const wrapper = mount(AppRadioGroup, { props: { legend: 'Kind', options, modelValue: '' } });
    const names = wrapper.findAll('input').map((input) => input.attributes('name'));
    expect(new Set(names).size).toBe(1);
    await wrapper.find('input[value="air"]').setValue(true);
    expect(wrapper.emitted('update:modelValue')).toEqual([['air']]);
  });
});

describe('a select', () => {
  it('offers an empty first entry in the words given', () => {
    const props = { label: 'Lab', modelValue: '', options, placeholder: 'All labs' };
    const entries = mount(AppSelect, { props }).findAll('option');
    expect(entries.map((entry) => entry.text())).toEqual([
      'All labs',
      'Contact sensor',
      'Airborne microphone',
    ]);
  });
});

describe('a number', () => {
  it.each([
    ['12.5', 12.5],
    ['12,5', 12.5],
    ['1 000 000', 1_000_000],
    ['\u22123', -3],
    ['2e-6', 2e-6],
    ['.5', 0.5],
    ['', null],
    ['12.5.1', undefined],
    ['abc', undefined],
    ['1e999', undefined],
  ])('typed as "%s" is read as %s', (text, value) => {
    expect(readTypedNumber(text)).toBe(value);
  });

  it('reads its unit aloud and shows it at the end of the field', () => {
    const props = { label: 'Cooling rate', unit: 'K/s', modelValue: 2 };
    const wrapper = mount(AppNumber, { props });
    expect(wrapper.find('label').text()).toBe('Cooling rate, K/s');
    expect(wrapper.find('.unit').attributes('aria-hidden')).toBe('true');
  });

  it('says what is wrong only after the field was left', async () => {
    const wrapper = mount(AppNumber, { props: { label: 'Gain', modelValue: null, max: 10 } });
    await wrapper.find('input').setValue('12');
    expect(wrapper.text()).not.toContain('The most is 10.');
    await wrapper.find('input').trigger('blur');
    expect(wrapper.text()).toContain('The most is 10.');
    expect(wrapper.emitted('update:modelValue')?.at(-1)).toEqual([12]);
  });
});

describe('messages', () => {
  it('go on from the label, or are sentences of their own', () => {
    expect(fieldSentence('Password', 'needs at least 12 characters')).toBe(
      'Password needs at least 12 characters.',
    );
    expect(fieldSentence('Gain', 'The most is 10.')).toBe('The most is 10.');
    expect(fieldSentence('Gain', undefined)).toBeUndefined();
  });
});

describe('a day and time', () => {
  it('comes back to the same instant through the field', () => {
    const instant = '2026-11-30T09:12:07.000Z';
    expect(fromLocalText(toLocalText(instant))).toBe(instant);
  });

  it('is null where the field is empty', () => {
    expect(fromLocalText('')).toBeNull();
    expect(toLocalText(null)).toBe('');
  });
});
