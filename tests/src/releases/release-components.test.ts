import { mount } from '@vue/test-utils';
import { describe, expect, it } from 'vitest';
import type { Gates } from '@shared/contract/collections.ts';
import type { Release } from '@shared/contract/releases.ts';
import BarList from '@/components/releases/BarList.vue';
import ReleaseForm from '@/components/releases/ReleaseForm.vue';
import ReleaseWork from '@/components/releases/ReleaseWork.vue';
import WithdrawDialog from '@/components/releases/WithdrawDialog.vue';

const gates: Gates = {
  gates: [],
  releasable: true,
  possibleLicences: ['CC-BY-4.0', 'CC-BY-SA-4.0'],
  previousVersion: '1.0.0',
  minimumVersion: '1.1.0',
  minimumVersionReason: '3 rows of recordings were added.',
};

const release: Release = {
  ...{ id: 'r', collectionId: 'c', collectionTitle: 'Dendritic ice', slug: 'ice', version: '1.1.0' },
  ...{ state: 'built', licence: 'CC-BY-4.0', releaseDate: '2026-12-01', recordingCount: 4, eventCount: 98 },
  ...{ sizeBytes: 49_113_221, publishedAt: null, description: 'Droplets.', notes: 'More droplets.' },
  ...{ publisher: 'Northlight', creators: [], citation: 'Varga (2026)', usage: null, doi: null },
  ...{ fileName: 'ice-1.1.0.zip', sha256: 'ab'.repeat(32), classes: [], materials: [], labs: ['Northlight'] },
  files: [{ path: 'bagit.txt', sizeBytes: 54, sha256: 'cd'.repeat(32) }],
  ...{ failure: null, progress: 1, withdrawnReason: null, otherVersions: [] },
};

function mountForm(part: Partial<Gates> = {}) {
  const props = { gates: { ...gates, ...part }, isBusy: false, messages: {}, error: undefined };
  return mount(ReleaseForm, { props });
}

function mountWork(part: Partial<Release> = {}) {
  const props = {
    release: { ...release, ...part },
    archiveHref: '/archive',
    isPublishing: false,
    publishError: undefined,
    isRebuilding: false,
    rebuildError: undefined,
  };
  return mount(ReleaseWork, { props, attachTo: document.body });
}

describe('the form of a release', () => {
  it('starts with the least version and the loosest licence, and sends what was typed', async () => {
    const wrapper = mountForm();
    await wrapper.find('textarea').setValue('Three further droplets.');
    await wrapper.find('form').trigger('submit');
    expect(wrapper.emitted('build')).toEqual([
      [{ version: '1.1.0', licence: 'CC-BY-4.0', notes: 'Three further droplets.' }],
    ]);
  });

  it('refuses a version that is too small, with the reason', async () => {
    const wrapper = mountForm();
    await wrapper.find('input').setValue('1.0.5');
    await wrapper.find('textarea').setValue('Three further droplets.');
    await wrapper.find('form').trigger('submit');
    expect(wrapper.emitted('build')).toBeUndefined();
    expect(wrapper.text()).toContain('Version has to be 1.1.0 or more.');
  });

  it('follows the least version while nobody has typed another', async () => {
    const wrapper = mountForm();
    await wrapper.setProps({ gates: { ...gates, minimumVersion: '2.0.0' } });
    expect(wrapper.find('input').element.value).toBe('2.0.0');
  });

  it('cannot be sent while a gate is open, and says so', () => {
    const wrapper = mountForm({ releasable: false });
    expect(wrapper.find('button').attributes('disabled')).toBeDefined();
    expect(wrapper.text()).toContain('Close the open gates first.');
  });
});

describe('a release in preparation', () => {
  it('shows how far the build is', () => {
    const wrapper = mountWork({ state: 'building', progress: 0.4 });
    expect(wrapper.text()).toContain('Building version 1.1.0');
    expect(wrapper.find('[role="progressbar"]').attributes('aria-valuenow')).toBe('40');
  });

  it('is published only from the dialog that says what publishing means', async () => {
    const wrapper = mountWork();
    expect(wrapper.text()).toContain('verified by an independent reader');
    await wrapper.find('button.is-primary').trigger('click');
    expect(wrapper.find('dialog').text()).toContain('It never changes from then on.');
    expect(wrapper.emitted('publish')).toBeUndefined();
    await wrapper.find('dialog form').trigger('submit');
    expect(wrapper.emitted('publish')).toHaveLength(1);
  });

  it('gives the reason of a failure and another try', async () => {
    const wrapper = mountWork({ state: 'failed', failure: 'The disk is full.' });
    expect(wrapper.find('[role="alert"]').text()).toContain('The disk is full.');
    await wrapper.find('button').trigger('click');
    expect(wrapper.emitted('rebuild')).toHaveLength(1);
  });
});

describe('withdrawing', () => {
  it('needs a sentence', async () => {
    const props = { release, isOpen: false, isBusy: false, error: undefined };
    const wrapper = mount(WithdrawDialog, { props, attachTo: document.body });
    await wrapper.setProps({ isOpen: true });
    await wrapper.find('form').trigger('submit');
    expect(wrapper.emitted('withdraw')).toBeUndefined();
    expect(wrapper.text()).toContain('needs a sentence');
    await wrapper.find('textarea').setValue('One file names a person.');
    await wrapper.find('form').trigger('submit');
    expect(wrapper.emitted('withdraw')).toEqual([['One file names a person.']]);
  });
});

describe('bars', () => {
  it('are drawn against the longest, with the figure in words of the page', () => {
    const bars = [
      { key: 'crack', label: 'crack', count: 80 },
      { key: 'bubble', label: 'bubble', count: 20 },
    ];
    const wrapper = mount(BarList, { props: { bars, tone: 'fracture' } });
    expect(wrapper.findAll('.fill').map((fill) => fill.attributes('style'))).toEqual([
      'width: 100%;',
      'width: 25%;',
    ]);
    expect(wrapper.findAll('dd').map((value) => value.text())).toEqual(['80', '20']);
  });
});
