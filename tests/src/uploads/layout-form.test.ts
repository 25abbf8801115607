import { mount } from '@vue/test-utils';
import { describe, expect, it } from 'vitest';
import LayoutForm from '@/components/uploads/LayoutForm.vue';
import { useLayoutForm } from '@/composables/uploads/layout-form.ts';
import type { Undeclared } from '@/composables/uploads/read-recording-file.ts';

function mountForm(undeclared: Undeclared) {
  const wrapper = mount(LayoutForm, {
    props: { undeclared, fileName: 'burst.dat' },
    attachTo: document.body,
  });
  const field = (label: string) => {
    const found = wrapper.findAll('label').find((one) => one.text().startsWith(label));
    if (!found) throw new Error(`No field ${label}.`);
    return wrapper.find(`[id="${found.attributes('for')}"]`);
  };
  return { wrapper, field, declared: () => wrapper.emitted('declare')?.map(([layout]) => layout) };
}

describe('the declaration of a layout', () => {
  it('of raw samples is what was chosen, with numbers as numbers', async () => {
    const { wrapper, field, declared } = mountForm({ kind: 'raw', firstLines: [] });
    await field('Numbers').setValue('unsigned');
    await field('Width of a sample').setValue('24');
    await field('Byte order').setValue('big');
    await field('Channels').setValue('2');
    await field('Sample rate').setValue('500000');
    await field('Bytes before').setValue('512');
    await wrapper.find('form').trigger('submit');
    expect(declared()).toEqual([
      {
        kind: 'raw',
        encoding: 'unsigned',
        bitsPerSample: 24,
        byteOrder: 'big',
        channels: 2,
        sampleRateHz: 500_000,
        headerBytes: 512,
      },
    ]);
  });

  it('of a table shows how it begins and takes times or a rate', async () => {
    const { wrapper, field, declared } = mountForm({ kind: 'CSV', firstLines: ['t;U', '0;0.1'] });
    expect(wrapper.find('pre').text()).toBe('t;U\n0;0.1');
    await field('Unit of the times').setValue('us');
    await field('Columns of samples').setValue('1, 3');
    await wrapper.find('form').trigger('submit');
    await field('When each sample').setValue('rate');
    await field('Sample rate').setValue('1000');
    await wrapper.find('form').trigger('submit');
    const table = { kind: 'CSV', valueColumns: [1, 3], unit: 'V', timeUnit: 'us' };
    expect(declared()).toEqual([
      { ...table, timeColumn: 0, sampleRateHz: null },
      { ...table, timeColumn: null, sampleRateHz: 1000 },
    ]);
  });

  it('tells in words what is missing, and leads there', async () => {
    const { wrapper, field, declared } = mountForm({ kind: 'raw', firstLines: [] });
    await wrapper.find('form').trigger('submit');
    expect(declared()).toBeUndefined();
    expect(wrapper.text()).toContain('must be a whole number of hertz');
    await wrapper.vm.$nextTick();
    expect(document.activeElement?.id).toBe(field('Sample rate').attributes('id'));
  });

  it.each([
    [
      'a column twice',
      { valueColumns: '1, 1' },
      { valueColumns: 'must name each column once, and not the column of times' },
    ],
    [
      'words for columns',
      { valueColumns: 'volts' },
      { valueColumns: 'must be numbers of columns, for example 1, 2' },
    ],
    ['no column', { valueColumns: '' }, { valueColumns: 'must be numbers of columns, for example 1, 2' }],
    [
      'no rate',
      { clock: 'rate' as const },
      { sampleRateHz: 'must be a whole number of hertz from 1 to 20,000,000' },
    ],
  ])('of a table with %s is not whole', (_, changes, messages) => {
    const form = useLayoutForm('CSV');
    Object.assign(form.draft, changes);
    expect(form.check()).toBeUndefined();
    expect(form.messages.value).toEqual(messages);
  });

  it('of floats in 24 bits is not whole', () => {
    const form = useLayoutForm('raw');
    Object.assign(form.draft, { encoding: 'float', bitsPerSample: '24', sampleRateHz: 1000 });
    expect(form.check()).toBeUndefined();
    expect(Object.keys(form.messages.value)).toEqual(['bitsPerSample']);
  });
});
