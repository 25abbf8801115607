import { mount } from '@vue/test-utils';
import { describe, expect, it } from 'vitest';
import { nextTick } from 'vue';
import AppDialog from '@/components/app/AppDialog.vue';

async function mountDialog(props: object = {}) {
  const base = { isOpen: true, title: 'Withdraw 1.0.0?', confirmLabel: 'Withdraw' };
  const wrapper = mount(AppDialog, { props: { ...base, ...props }, attachTo: document.body });
  await nextTick();
  return wrapper;
}

describe('a dialog', () => {
  it('is named by its heading and opens modally', async () => {
    const wrapper = await mountDialog();
    const dialog = wrapper.find('dialog');
    expect(wrapper.find(`#${dialog.attributes('aria-labelledby')}`).text()).toBe('Withdraw 1.0.0?');
    expect((dialog.element as HTMLDialogElement).open).toBe(true);
    wrapper.unmount();
  });

  it('does not confirm without a reason where one is asked for', async () => {
    const wrapper = await mountDialog({ reasonLabel: 'Why' });
    await wrapper.find('form').trigger('submit');
    expect(wrapper.emitted('confirm')).toBeUndefined();
    expect(wrapper.text()).toContain('Say why, in a few words.');
    await wrapper.find('textarea').setValue('  A partner objected. ');
    await wrapper.find('form').trigger('submit');
    expect(wrapper.emitted('confirm')).toEqual([['A partner objected.']]);
    wrapper.unmount();
  });

  it('closes when it is told to, without asking to be closed again', async () => {
    const wrapper = await mountDialog();
    await wrapper.setProps({ isOpen: false });
    expect((wrapper.find('dialog').element as HTMLDialogElement).open).toBe(false);
    expect(wrapper.emitted('close')).toBeUndefined();
    wrapper.unmount();
  });

  it('asks to be closed on Escape', async () => {
    const wrapper = await mountDialog();
    await wrapper.find('dialog').trigger('cancel');
    expect(wrapper.emitted('close')).toHaveLength(1);
    wrapper.unmount();
  });
});
