import { mount } from '@vue/test-utils';
import { describe, expect, it } from 'vitest';
import type { Trace } from '@shared/contract/traces.ts';
import TraceChangeDialog from '@/components/runs/TraceChangeDialog.vue';

const trace: Trace = {
  ...{ id: 'trace', runId: 'run', name: 'stage 17', quantity: 'temperature', unit: '°C' },
  ...{ fileName: 'stage.csv', sha256: 'a', sizeBytes: 100, points: 10, durationS: 9 },
  mapping: {
    ...{ separator: 'comma', decimal: 'point', timeColumn: 0, timeUnit: 's', valueColumn: 1, unit: '°C' },
  },
  ...{ minimum: -20, maximum: 5, runOffsetNs: 2e9, clockPpm: 3 },
  ...{ createdAt: '2026-03-02T13:10:00.000Z', revision: 1, editable: true },
};

async function open() {
  const wrapper = mount(TraceChangeDialog, {
    props: { trace: null, recordings: [], isBusy: false, error: undefined },
    attachTo: document.body,
  });
  await wrapper.setProps({ trace });
  const field = (label: string) => {
    const found = wrapper.findAll('label').find((one) => one.text().startsWith(label));
    return wrapper.find(`#${CSS.escape(found?.attributes('for') ?? '')}`);
  };
  const save = () =>
    wrapper
      .findAll('button')
      .find((one) => one.text() === 'Save the changes')
      ?.trigger('click');
  return { wrapper, field, save };
}

describe('changing a trace', () => {
  it('tells name, quantity and unit beside the place, and leaves what was not touched', async () => {
    const { wrapper, field, save } = await open();
    await field('Name').setValue('Thermocouple under the stage');
    await save();
    expect(wrapper.emitted('save')).toEqual([
      [
        {
          name: 'Thermocouple under the stage',
          ...{ quantity: 'temperature', unit: '°C', runOffsetNs: 2e9, clockPpm: 3 },
        },
      ],
    ]);
    wrapper.unmount();
  });

  it('is not sent with a unit that is none of a temperature, or without a name', async () => {
    const { wrapper, field, save } = await open();
    await field('Unit').setValue('bar');
    await save();
    expect(wrapper.text()).toContain('of a temperature is °C, K or °F');
    await field('Quantity').setValue('pressure');
    await field('Name').setValue(' ');
    await save();
    expect(wrapper.emitted('save')).toBeUndefined();
    await field('Name').setValue('Gas');
    await save();
    expect(wrapper.emitted('save')?.[0]).toMatchObject([{ name: 'Gas', quantity: 'pressure', unit: 'bar' }]);
    wrapper.unmount();
  });
});
