import { mount } from '@vue/test-utils';
import { describe, expect, it } from 'vitest';
import type { HeldRecording } from '@shared/contract/reviews.ts';
import DecisionForm from '@/components/reviews/DecisionForm.vue';

const heldRecording: HeldRecording = {
  recordingId: '01a230a3-450c-726f-a776-2f91e91c86be',
  fileName: 'film-07.wav',
  runTitle: 'Film 07',
  labId: '01a230a3-0498-7775-b874-ccc6522c4076',
  labName: 'Northlight',
  uploadedByName: 'Tomasz Brandvold',
  uploadedByMe: false,
  heldAt: '2026-12-01T08:00:00.000Z',
  findings: [],
  decisions: ['restrict', 'refuse'],
  limits: 'The file itself names a person.',
};

function mountForm(held: Partial<HeldRecording> = {}) {
  const props = { held: { ...heldRecording, ...held }, isBusy: false, messages: {}, error: undefined };
  return mount(DecisionForm, { props, attachTo: document.body });
}

describe('the form of a decision', () => {
  it('says why a decision is missing and does not let it be chosen', () => {
    const wrapper = mountForm();
    expect(wrapper.text()).toContain('The file itself names a person.');
    expect(wrapper.find('input[value="clear"]').attributes('disabled')).toBeDefined();
    expect(wrapper.find('input[value="restrict"]').attributes('disabled')).toBeUndefined();
  });

  it('asks for a decision and a sentence before it asks to confirm', async () => {
    const wrapper = mountForm();
    await wrapper.find('form').trigger('submit');
    expect(wrapper.text()).toContain('Decision needs a choice.');
    expect(wrapper.text()).toContain('Reason needs a sentence (at least 10 characters).');
    expect(wrapper.find('dialog form').exists()).toBe(false);
  });

  it('is sent only from the dialog that says what it means', async () => {
    const wrapper = mountForm();
    await wrapper.find('input[value="restrict"]').setValue(true);
    await wrapper.find('textarea').setValue('A partner has not agreed yet.');
    await wrapper.find('form').trigger('submit');
    expect(wrapper.emitted('decide')).toBeUndefined();
    expect(wrapper.find('dialog').text()).toContain('never enters a release');
    await wrapper.find('dialog form').trigger('submit');
    expect(wrapper.emitted('decide')).toEqual([
      [{ decision: 'restrict', reason: 'A partner has not agreed yet.' }],
    ]);
  });

  it('is not there for an upload of one’s own, and the reason is', () => {
    const limits = 'You brought this recording in yourself.';
    const wrapper = mountForm({ uploadedByMe: true, decisions: [], limits });
    expect(wrapper.find('form').exists()).toBe(false);
    expect(wrapper.text()).toContain(limits);
  });
});
