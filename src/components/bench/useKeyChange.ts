import { ref, shallowRef } from 'vue';
import { readableCombo } from '@/composables/hotkey-combo.ts';
import { remapKey, resetKey } from '@/composables/key-remap.ts';
import type { Remapped, RemapOutcome } from '@/composables/key-remap.ts';
import { useAnnounce } from '@/composables/useAnnounce.ts';
import type { Hotkey } from '@/composables/useHotkeys.ts';
import { useHotkeySettings } from '@/composables/useHotkeySettings.ts';

/** Puts actions on other keys; where another action has the key, that is told with its name, and nothing changes unasked. */
export function useKeyChange(firstHotkeys: () => readonly Hotkey[]) {
  const { settings, remapTo } = useHotkeySettings();
  const { announce } = useAnnounce();
  const listeningId = ref<string | null>(null);
  const words = ref('');
  /** What pressing "change places" would do. */
  const offer = shallowRef<{ remapped: Remapped; words: string } | null>(null);

  function tell(text: string): void {
    words.value = text;
    void announce(text);
  }

  function labelOf(id: string): string {
    return firstHotkeys().find((hotkey) => hotkey.id === id)?.label ?? id;
  }

  function settle(id: string, combo: string, outcome: RemapOutcome): void {
    offer.value = null;
    if (outcome.kind === 'refused') return tell(outcome.reason);
    if (outcome.kind === 'done') {
      remapTo(outcome.remapped);
      return tell(`${labelOf(id)}: now on ${readableCombo(combo)}`);
    }
    const taken = `${readableCombo(combo)} does already: ${outcome.by.label}.`;
    if (outcome.swapped)
      offer.value = {
        remapped: outcome.swapped,
        words: `${labelOf(id)} and ${outcome.by.label} have changed places`,
      };
    tell(outcome.swapped ? `${taken} Both can change places.` : `${taken} Choose another key.`);
  }

  function take(id: string, combo: string): void {
    listeningId.value = null;
    settle(id, combo, remapKey(firstHotkeys(), settings.value.remapped, id, combo));
  }

  function reset(id: string): void {
    const first = firstHotkeys().find((hotkey) => hotkey.id === id)?.combo ?? '';
    settle(id, first, resetKey(firstHotkeys(), settings.value.remapped, id));
  }

  function changePlaces(): void {
    if (!offer.value) return;
    remapTo(offer.value.remapped);
    tell(offer.value.words);
    offer.value = null;
  }

  function resetAll(): void {
    offer.value = null;
    remapTo({});
    tell('All keys are as they were at first');
  }

  function listen(id: string | null): void {
    listeningId.value = id;
    if (id === null) return;
    words.value = '';
    offer.value = null;
  }

  return { settings, listeningId, words, offer, listen, take, reset, changePlaces, resetAll };
}
