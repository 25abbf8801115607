import { useQuery } from '@tanstack/vue-query';
import { useLocalStorage } from '@vueuse/core';
import { computed, ref, watch } from 'vue';
import { licenceSchema } from '@shared/contract/licence.ts';
import type { Run } from '@shared/contract/runs.ts';
import { getRun, listRuns } from '@/api/runs.ts';
import { listSensors, listSetups } from '@/api/sensors.ts';
import { declarationFormSchema, emptyDeclaration } from '@/composables/uploads/declaration-form.ts';
import { useAddressQuery } from '@/composables/useAddressQuery.ts';
import { useZodForm } from '@/composables/useZodForm.ts';

const mostRuns = 200;

/** What a lab chose last, offered again: most recordings of a series are alike. */
interface LastChoices {
  licence: string;
  setupByLab: Record<string, string>;
}

/** The choices before any file: the run, the set-up, and what has to be declared. */
export function useBringIn() {
  const runId = useAddressQuery('run');
  const last = useLocalStorage<LastChoices>('recalesce.bring-in', { licence: '', setupByLab: {} });
  const form = useZodForm(
    declarationFormSchema,
    emptyDeclaration(licenceSchema.safeParse(last.value.licence).data ?? ''),
  );
  const wasTried = ref(false);

  const runs = useQuery({
    queryKey: ['runs', { limit: mostRuns }],
    queryFn: ({ signal }) => listRuns({ limit: mostRuns }, signal),
  });
  const asked = useQuery({
    queryKey: computed(() => ['run', runId.value]),
    queryFn: ({ signal }) => getRun(runId.value, signal),
    enabled: computed(() => runId.value !== ''),
  });
  const run = computed<Run | null>(() => {
    const found = asked.data.value;
    return found?.id === runId.value && found.editable ? found : null;
  });
  /** Own runs only; the one of the address is among them however old it is. */
  const ownRuns = computed<Run[]>(() => {
    const own = (runs.data.value?.items ?? []).filter(({ editable }) => editable);
    return run.value && !own.some(({ id }) => id === run.value?.id) ? [run.value, ...own] : own;
  });

  const labId = computed(() => run.value?.labId ?? '');
  const ofLab = { enabled: computed(() => labId.value !== '') };
  const setups = useQuery({
    queryKey: computed(() => ['setups', labId.value]),
    queryFn: ({ signal }) => listSetups(labId.value, signal),
    ...ofLab,
  });
  const sensors = useQuery({
    queryKey: computed(() => ['sensors', labId.value]),
    queryFn: ({ signal }) => listSensors(labId.value, signal),
    ...ofLab,
  });
  const ownSetups = computed(() => (labId.value === '' ? [] : (setups.data.value ?? [])));

  watch([labId, ownSetups], ([lab, own]) => {
    if (own.some(({ id }) => id === form.draft.setupId)) return;
    const lastUsed = last.value.setupByLab[lab];
    form.draft.setupId =
      own.find(({ id }) => id === lastUsed)?.id ?? (own.length === 1 ? (own[0]?.id ?? '') : '');
  });

  /** All that must be told, or undefined while something is missing; the messages then show. */
  function check() {
    wasTried.value = true;
    const declaration = form.check();
    if (!declaration || !run.value) return undefined;
    last.value = {
      licence: declaration.licence,
      setupByLab: { ...last.value.setupByLab, [run.value.labId]: declaration.setupId },
    };
    return { target: { ...declaration, runId: run.value.id }, runTitle: run.value.title };
  }

  return {
    form,
    runId,
    run,
    runs: ownRuns,
    areRunsLoading: runs.isPending,
    error: computed(() => runs.error.value ?? asked.error.value ?? setups.error.value),
    runMessage: computed(() => (wasTried.value && !run.value ? 'is needed' : undefined)),
    labId,
    setups: ownSetups,
    sensors: computed(() => sensors.data.value ?? []),
    check,
  };
}
