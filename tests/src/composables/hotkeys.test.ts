import { mount } from '@vue/test-utils';
import { afterEach, describe, expect, it, vi } from 'vitest';
import { defineComponent, h, nextTick, ref } from 'vue';
import { positionCombo, readableCombo, signCombo } from '@/composables/hotkey-combo.ts';
import { useHotkeys } from '@/composables/useHotkeys.ts';
import { useHotkeySettings } from '@/composables/useHotkeySettings.ts';

const isActive = ref(true);
const run = vi.fn();

const Bench = defineComponent({
  setup() {
    useHotkeys(
      [
        { id: 'test.mark', combo: 'KeyF', label: 'Mark', run: () => run('mark') },
        { id: 'test.undo', combo: 'Control+KeyZ', label: 'Undo', run: () => run('undo') },
        { id: 'test.help', combo: 'sign:?', label: 'Keys', run: () => run('help') },
        { id: 'test.play', combo: 'Space', label: 'Play', run: () => run('play') },
      ],
      isActive,
    );
    return () => h('div', [h('input'), h('button', 'Go')]);
  },
});

function press(target: EventTarget, init: KeyboardEventInit): void {
  target.dispatchEvent(new KeyboardEvent('keydown', { bubbles: true, cancelable: true, ...init }));
}

afterEach(() => {
  run.mockReset();
  isActive.value = true;
  useHotkeySettings().reset();
});

describe('combinations', () => {
  const event = { key: 'F', code: 'KeyF', shiftKey: true, ctrlKey: false, altKey: false, metaKey: true };

  it('are named by position, with the command key as control', () => {
    expect(positionCombo(event)).toBe('Control+Shift+KeyF');
  });

  it('are named by sign without shift, which is part of the sign', () => {
    expect(signCombo({ ...event, metaKey: false, key: '?' })).toBe('sign:?');
  });

  it('are shown as they stand on the keys', () => {
    expect(readableCombo('Control+Shift+KeyZ')).toBe('Ctrl\u00A0Shift\u00A0Z');
    expect(readableCombo('sign:?')).toBe('?');
  });
});

describe('hotkeys', () => {
  it('run what was pressed', () => {
    const wrapper = mount(Bench, { attachTo: document.body });
    press(document.body, { key: 'f', code: 'KeyF' });
    press(document.body, { key: 'z', code: 'KeyZ', ctrlKey: true });
    press(document.body, { key: '?', code: 'Minus', shiftKey: true });
    expect(run.mock.calls.flat()).toEqual(['mark', 'undo', 'help']);
    wrapper.unmount();
  });

  it('never fire while somebody types', () => {
    const wrapper = mount(Bench, { attachTo: document.body });
    press(wrapper.find('input').element, { key: 'f', code: 'KeyF' });
    press(document.body, { key: 'f', code: 'KeyF', isComposing: true });
    expect(run).not.toHaveBeenCalled();
    wrapper.unmount();
  });

  it('leave Space to the button that has the focus', () => {
    const wrapper = mount(Bench, { attachTo: document.body });
    press(wrapper.find('button').element, { key: ' ', code: 'Space' });
    expect(run).not.toHaveBeenCalled();
    press(document.body, { key: ' ', code: 'Space' });
    expect(run).toHaveBeenCalledExactlyOnceWith('play');
    wrapper.unmount();
  });

  it('do not repeat while a key is held, unless they are meant to', () => {
    const wrapper = mount(Bench, { attachTo: document.body });
    press(document.body, { key: 'f', code: 'KeyF', repeat: true });
    expect(run).not.toHaveBeenCalled();
    wrapper.unmount();
  });

  it('rest behind an open dialog', () => {
    const wrapper = mount(Bench, { attachTo: document.body });
    const dialog = document.createElement('dialog');
    dialog.setAttribute('open', '');
    document.body.append(dialog);
    press(document.body, { key: 'f', code: 'KeyF' });
    expect(run).not.toHaveBeenCalled();
    dialog.remove();
    wrapper.unmount();
  });

  it('can be switched off where they are single keys', async () => {
    const wrapper = mount(Bench, { attachTo: document.body });
    useHotkeySettings().settings.value.areSingleKeysOn = false;
    await nextTick();
    press(document.body, { key: 'f', code: 'KeyF' });
    press(document.body, { key: 'z', code: 'KeyZ', ctrlKey: true });
    expect(run.mock.calls.flat()).toEqual(['undo']);
    wrapper.unmount();
  });

  it('can be put on other keys', async () => {
    const wrapper = mount(Bench, { attachTo: document.body });
    useHotkeySettings().remap('test.mark', 'KeyJ');
    await nextTick();
    press(document.body, { key: 'f', code: 'KeyF' });
    press(document.body, { key: 'j', code: 'KeyJ' });
    expect(run).toHaveBeenCalledExactlyOnceWith('mark');
    wrapper.unmount();
  });

  it('stop with their component and while they are not active', async () => {
    const wrapper = mount(Bench, { attachTo: document.body });
    isActive.value = false;
    press(document.body, { key: 'f', code: 'KeyF' });
    isActive.value = true;
    wrapper.unmount();
    press(document.body, { key: 'f', code: 'KeyF' });
    expect(run).not.toHaveBeenCalled();
  });
});
