import { QueryClient, VueQueryPlugin } from '@tanstack/vue-query';
import { flushPromises, mount } from '@vue/test-utils';
import { beforeEach, describe, expect, it, vi } from 'vitest';
import { defineComponent, h } from 'vue';
import type { GrowthPhase, GrowthPhases, PatchPhase, PutPhase } from '@shared/contract/phases.ts';
import { usePhaseMarking } from '@/composables/runs/usePhaseMarking.ts';
import { useRunPhases } from '@/composables/runs/useRunPhases.ts';

const api = vi.hoisted(() => ({
  stored: new Map<string, GrowthPhase>(),
  gone: new Set<string>(),
  refuse: null as Error | null,
}));

vi.mock('@/api/phases.ts', () => ({
  listPhases: (): Promise<GrowthPhases> =>
    Promise.resolve({
      items: [...api.stored.values()],
      isWithheld: false,
      may: { addForLab: true, addInPassId: null },
    }),
  putPhase: (id: string, body: PutPhase) => {
    if (api.refuse) return Promise.reject(api.refuse);
    if (api.gone.has(id)) return Promise.reject(new Error('removed'));
    const times = { createdAt: '', updatedAt: '', isSoundOpen: true, editable: true };
    const phase = { ...body, ...times, id, revision: 1 } as GrowthPhase;
    api.stored.set(id, phase);
    return Promise.resolve(phase);
  },
  patchPhase: (id: string, revision: number, body: PatchPhase) => {
    const held = api.stored.get(id);
    if (!held || held.revision !== revision) return Promise.reject(new Error('stale'));
    const given = Object.entries(body).filter(([, value]) => value !== undefined);
    const phase = { ...held, ...Object.fromEntries(given), revision: revision + 1 };
    api.stored.set(id, phase);
    return Promise.resolve(phase);
  },
  deletePhase: (id: string) => {
    api.stored.delete(id);
    api.gone.add(id);
    return Promise.resolve();
  },
}));

async function setUp() {
  let made: { phases: ReturnType<typeof useRunPhases>; marking: ReturnType<typeof usePhaseMarking> } | null =
    null;
  const Probe = defineComponent(() => {
    const phases = useRunPhases('018f0000-0000-7000-8000-000000000009');
    made = { phases, marking: usePhaseMarking(phases) };
    return () => h('div');
  });
  mount(Probe, { global: { plugins: [[VueQueryPlugin, { queryClient: new QueryClient() }]] } });
  await flushPromises();
  if (!made) throw new Error('nothing was set up');
  return made as { phases: ReturnType<typeof useRunPhases>; marking: ReturnType<typeof usePhaseMarking> };
}

beforeEach(() => {
  api.stored.clear();
  api.gone.clear();
  api.refuse = null;
});

const told = () => [...api.stored.values()].map(({ phase, startNs, endNs }) => [phase, startNs, endNs]);

describe('marking growth phases', () => {
  it('hands the end of one on as the start of the next, and offers what mostly follows', async () => {
    const { marking } = await setUp();
    marking.startHere(1e9);
    await marking.endHere(9e9);
    expect(marking.kind.value).toBe('recalescence');
    await marking.endHere(9.5e9);
    expect(told()).toEqual([
      ['supercooled-liquid', 1e9, 9e9],
      ['recalescence', 9e9, 9.5e9],
    ]);
  });

  it('adds nothing without a start, nor with an end before it', async () => {
    const { marking } = await setUp();
    await marking.endHere(2e9);
    marking.startHere(5e9);
    await marking.endHere(4e9);
    expect(told()).toEqual([]);
  });

  it('moves the edges of the selected one, which never cross', async () => {
    const { marking, phases } = await setUp();
    marking.startHere(1e9);
    await marking.endHere(2e9);
    marking.select(phases.items.value[0]?.id ?? null);
    await marking.moveEdge(phases.items.value[0]?.id ?? '', 'start', 9e9);
    expect(told()).toEqual([['supercooled-liquid', 2e9 - 1000, 2e9]]);
  });

  it('takes back and does again what was added, changed and removed', async () => {
    const { marking, phases } = await setUp();
    marking.startHere(1e9);
    await marking.endHere(2e9);
    const id = phases.items.value[0]?.id ?? '';
    await phases.change(id, { phase: 'not-visible' }, 'kind');
    await phases.remove(id);
    expect(told()).toEqual([]);
    await phases.undo();
    expect(told()).toEqual([['not-visible', 1e9, 2e9]]);
    await phases.undo();
    expect(told()).toEqual([['supercooled-liquid', 1e9, 2e9]]);
    await phases.undo();
    expect(told()).toEqual([]);
    await phases.redo();
    await phases.redo();
    expect(told()).toEqual([['not-visible', 1e9, 2e9]]);
    await phases.redo();
    expect(told()).toEqual([]);
  });

  it('says what went wrong and keeps the start, so that nothing has to be found again', async () => {
    const { marking, phases } = await setUp();
    api.refuse = new Error('The server cannot be reached.');
    marking.startHere(1e9);
    await marking.endHere(2e9);
    expect(phases.error.value).toBe(api.refuse);
    expect(marking.startNs.value).toBe(1e9);
    expect(phases.undoName.value).toBeNull();
    api.refuse = null;
    await marking.endHere(2e9);
    expect(told()).toHaveLength(1);
    expect(phases.error.value).toBeNull();
  });
});
