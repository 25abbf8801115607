import { mount } from '@vue/test-utils';
import { describe, expect, it } from 'vitest';
import { createMemoryHistory, createRouter } from 'vue-router';
import type { Gate } from '@shared/contract/collections.ts';
import type { RecordingListItem } from '@shared/contract/recordings.ts';
import AddRecordings from '@/components/collections/AddRecordings.vue';
import CollectionFields from '@/components/collections/CollectionFields.vue';
import { emptyCollectionDraft } from '@/components/collections/collection-draft.ts';
import GateList from '@/components/collections/GateList.vue';
import { emptyAddingFilter } from '@/composables/collections/adding-filter.ts';
import { routes } from '@/router/routes.ts';

const router = createRouter({ history: createMemoryHistory(), routes });
const global = { plugins: [router] };

const openGate: Gate = {
  key: 'credit',
  state: 'open',
  sentence: '1 run names nobody to credit.',
  href: '/runs/7',
  recordings: [{ id: '9', fileName: 'film.wav', why: 'Its run names nobody.' }],
};

describe('a list of gates', () => {
  it('says the state in words and links the page that closes an open one', () => {
    const wrapper = mount(GateList, { props: { gates: [openGate], ownPage: '/collections/1' }, global });
    expect(wrapper.text()).toContain('Open');
    expect(wrapper.find('a[href="/runs/7"]').text()).toBe('Open the run');
  });

  it('leads to the recordings of the same page where those close it', () => {
    const gates = [{ ...openGate, key: 'processing' as const, href: '/collections/1' }];
    const wrapper = mount(GateList, { props: { gates, ownPage: '/collections/1' }, global });
    expect(wrapper.find('a[href="/collections/1#recordings"]').exists()).toBe(true);
  });

  it('lets a recording that keeps it open be taken out', async () => {
    const wrapper = mount(GateList, { props: { gates: [openGate], ownPage: '/collections/1' }, global });
    await wrapper.find('button').trigger('click');
    expect(wrapper.emitted('takeOut')).toEqual([['9']]);
  });
});

function recording(id: string): RecordingListItem {
  return {
    ...{ id, runId: 'r', runTitle: 'Film 07', labId: 'l', labName: 'Northlight', material: 'water' },
    ...{ fileName: `${id}.wav`, sizeBytes: 1, sampleRateHz: 192_000, channels: 1, frames: 1, durationS: 1 },
    ...{ processing: 'measured', progress: 1, sharing: 'shared', ultrasonicVerdict: null },
    ...{ candidateCount: 3, createdAt: '2026-12-01T08:00:00.000Z' },
  };
}

function mountAdding(memberIds: string[]) {
  const props = {
    labs: [],
    matches: [recording('a'), recording('b')],
    total: { count: 2, capped: false },
    memberIds: new Set(memberIds),
    areMembersKnown: true,
    isLoading: false,
    error: undefined,
    isBusy: false,
    addError: undefined,
    filter: { ...emptyAddingFilter },
  };
  return mount(AddRecordings, { props, global });
}

describe('adding recordings', () => {
  it('offers those that are not in yet, by choice or all that match', async () => {
    const wrapper = mountAdding(['a']);
    expect(wrapper.findAll('input[type="checkbox"]')).toHaveLength(1);
    expect(wrapper.text().replace(/\u00A0/g, ' ')).toContain('Add all 1 recording that match');
    await wrapper.find('input[type="checkbox"]').setValue(true);
    const add = wrapper
      .findAll('button')
      .find((button) => button.text().replace(/\u00A0/g, ' ') === 'Add 1 chosen');
    await add?.trigger('click');
    expect(wrapper.emitted('addChosen')).toEqual([[['b']]]);
  });

  it('offers nothing where all are in', () => {
    const wrapper = mountAdding(['a', 'b']);
    const buttons = wrapper.findAll('button').filter((button) => button.text().startsWith('Add'));
    expect(buttons.every((button) => button.attributes('disabled') !== undefined)).toBe(true);
  });
});

describe('the form of a collection', () => {
  it('proposes a short name from the title until one is written by hand', async () => {
    const draft = emptyCollectionDraft('Anselm Varga');
    const props = { messages: {}, isSlugFixed: false, isNew: true, modelValue: draft };
    const wrapper = mount(CollectionFields, { props });
    await wrapper.setProps({ modelValue: { ...draft, title: 'Welds of spring' } });
    const slugField = wrapper.findAll('input').at(1);
    await wrapper.setProps({ modelValue: { ...wrapper.props('modelValue') } });
    expect(slugField?.element.value).toBe('welds-of-spring');
    await slugField?.setValue('spring-welds');
    await wrapper.setProps({ modelValue: { ...wrapper.props('modelValue'), title: 'Welds of autumn' } });
    expect(wrapper.props('modelValue').slug).toBe('spring-welds');
  });
});
