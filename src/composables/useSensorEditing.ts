import { useQueryClient } from '@tanstack/vue-query';
import { ref, shallowRef } from 'vue';
import type { SaveSensor, SaveSetup, Sensor, Setup } from '@shared/contract/sensors.ts';
import { createSensor, createSetup, updateSensor, updateSetup } from '@/api/sensors.ts';
import { useAnnounce } from '@/composables/useAnnounce.ts';
import { useSubmit } from '@/composables/useSubmit.ts';

interface Saved<Row> {
  /** Told after it was stored, for pages that choose what was just made. */
  onSaved?: (row: Row) => void;
}

/** A form over the page for one kind of row: open for a new one or for one that is there, sent, closed. */
function useRowForm<Row extends { id: string; name: string; revision: number }, Input>(
  name: string,
  send: (input: Input, row: Row | null) => Promise<Row>,
  { onSaved }: Saved<Row>,
) {
  const queries = useQueryClient();
  const { announce } = useAnnounce();
  const isOpen = ref(false);
  const row = shallowRef<Row | null>(null);
  const sending = useSubmit(async (input: Input) => {
    const saved = await send(input, row.value);
    await Promise.all([
      queries.invalidateQueries({ queryKey: ['sensors'] }),
      queries.invalidateQueries({ queryKey: ['setups'] }),
    ]);
    await announce(`${name} ${saved.name} saved`);
    onSaved?.(saved);
  });

  function open(edited: Row | null = null): void {
    sending.clear();
    row.value = edited;
    isOpen.value = true;
  }

  async function save(input: Input): Promise<void> {
    if (await sending.submit(input)) isOpen.value = false;
  }

  return { isOpen, row, sending, open, save, close: () => (isOpen.value = false) };
}

export function useSensorForm(options: Saved<Sensor> = {}) {
  return useRowForm<Sensor, SaveSensor>(
    'Sensor',
    (input, row) => (row ? updateSensor(row.id, row.revision, input) : createSensor(input)),
    options,
  );
}

export function useSetupForm(options: Saved<Setup> = {}) {
  return useRowForm<Setup, SaveSetup>(
    'Set-up',
    (input, row) => (row ? updateSetup(row.id, row.revision, input) : createSetup(input)),
    options,
  );
}
