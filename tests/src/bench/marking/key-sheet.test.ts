import { mount } from '@vue/test-utils';
import { afterEach, beforeEach, describe, expect, it, vi } from 'vitest';
import { nextTick } from 'vue';
import BenchKeys from '@/components/bench/BenchKeys.vue';
import type { Hotkey } from '@/composables/useHotkeys.ts';
import { useHotkeySettings } from '@/composables/useHotkeySettings.ts';

const run = () => undefined;
const hotkeys: Hotkey[] = [
  { id: 'bench.class.crack', combo: 'KeyF', label: 'crack', group: 'Set a mark', run },
  { id: 'bench.class.crack.less', combo: 'Shift+KeyF', label: 'less', withShiftOf: 'bench.class.crack', run },
  { id: 'bench.note', combo: 'KeyN', label: 'write a note', group: 'Change', run },
  { id: 'bench.merge', combo: 'KeyM', label: 'make one', group: 'Change', run },
];

function mountSheet() {
  return mount(BenchKeys, {
    props: { isOpen: true, hotkeys, areSingleKeysOn: true },
    attachTo: document.body,
  });
}

type Sheet = ReturnType<typeof mountSheet>;
const button = (sheet: Sheet, label: string) => sheet.get(`button[aria-label^="${label}"]`);
const words = (sheet: Sheet) =>
  sheet
    .get('[data-key-words]')
    .text()
    .replace(/\u00A0/g, ' ');

async function putOn(sheet: Sheet, label: string, press: KeyboardEventInit): Promise<void> {
  await button(sheet, label).trigger('click');
  await button(sheet, 'Press the new key').trigger('keydown', press);
  await nextTick();
}

beforeEach(() => {
  vi.spyOn(HTMLDialogElement.prototype, 'showModal').mockImplementation(function (this: HTMLDialogElement) {
    this.open = true;
  });
});
afterEach(() => {
  useHotkeySettings().reset();
  vi.restoreAllMocks();
  document.body.innerHTML = '';
});

describe('the sheet of keys', () => {
  it('puts an action on the key that is pressed, and keeps that', async () => {
    const sheet = mountSheet();
    await putOn(sheet, 'write a note', { code: 'KeyX', key: 'x' });
    expect(useHotkeySettings().settings.value.remapped).toEqual({ 'bench.note': 'KeyX' });
    expect(button(sheet, 'write a note').text()).toBe('X');
    expect(words(sheet)).toBe('write a note: now on X');
    sheet.unmount();
  });

  it('leaves out a key that has nothing to act on here', async () => {
    const sheet = mountSheet();
    const silent = {
      id: 'bench.phase.start',
      combo: 'BracketLeft',
      label: 'a phase starts',
      group: 'Change',
      run,
    };
    await sheet.setProps({ hotkeys: [...hotkeys, { ...silent, isListed: () => false }] });
    expect(sheet.find('button[aria-label^="a phase starts"]').exists()).toBe(false);
    await sheet.setProps({ hotkeys: [...hotkeys, { ...silent, isListed: () => true }] });
    expect(button(sheet, 'a phase starts').text()).toBe('[');
    sheet.unmount();
  });

  it('tells whose key it is, changes nothing unasked, and lets both change places', async () => {
    const sheet = mountSheet();
    await putOn(sheet, 'write a note', { code: 'KeyF', key: 'f' });
    expect(useHotkeySettings().settings.value.remapped).toEqual({});
    expect(words(sheet)).toBe('F does already: crack. Both can change places.');
    await sheet
      .findAll('button')
      .find((one) => one.text() === 'Change places')
      ?.trigger('click');
    expect(useHotkeySettings().settings.value.remapped).toEqual({
      'bench.note': 'KeyF',
      'bench.class.crack': 'KeyN',
    });
    sheet.unmount();
  });

  it('leaves a key as it is by Escape, and refuses what belongs to the browser', async () => {
    const sheet = mountSheet();
    await putOn(sheet, 'make one', { code: 'Escape', key: 'Escape' });
    expect(useHotkeySettings().settings.value.remapped).toEqual({});
    await putOn(sheet, 'make one', { code: 'KeyW', key: 'w', ctrlKey: true });
    expect(words(sheet)).toMatch(/keep this combination for themselves/);
    expect(useHotkeySettings().settings.value.remapped).toEqual({});
    sheet.unmount();
  });

  it('resets one key, and all of them', async () => {
    const sheet = mountSheet();
    await putOn(sheet, 'write a note', { code: 'KeyX', key: 'x' });
    await putOn(sheet, 'make one', { code: 'KeyZ', key: 'z' });
    await sheet.get('button[aria-label="reset: make one"]').trigger('click');
    expect(useHotkeySettings().settings.value.remapped).toEqual({ 'bench.note': 'KeyX' });
    await sheet
      .findAll('button')
      .find((one) => one.text() === 'Reset all keys')
      ?.trigger('click');
    expect(useHotkeySettings().settings.value.remapped).toEqual({});
    sheet.unmount();
  });

  it('strikes single keys out while they are switched off', async () => {
    const sheet = mountSheet();
    await sheet.setProps({ areSingleKeysOn: false });
    expect(button(sheet, 'make one').classes()).toContain('silent');
    sheet.unmount();
  });
});
