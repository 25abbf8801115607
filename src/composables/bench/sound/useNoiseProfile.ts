import { computed, ref, shallowRef, watch } from 'vue';
import type { Ref } from 'vue';
import type { GateProfile } from '@shared/contract/mark-circumstances.ts';
import { getQuietSpan } from '@/api/views.ts';
import type { TimeWindow } from '@/composables/bench/time-axis.ts';

interface Options {
  recordingId: string;
  channel: Ref<number>;
  gate: Ref<GateProfile>;
}

/** The span whose noise is gated away: the machine's choice, or one that was drawn. */
export function useNoiseProfile({ recordingId, channel, gate }: Options) {
  /** `undefined` before it was asked for, `null` where the channel is silent throughout. */
  const machineSpan = shallowRef<TimeWindow | null>();
  const ownSpan = shallowRef<TimeWindow | null>(null);
  const problem = ref('');
  const span = computed(() => (gate.value === 'span' ? ownSpan.value : machineSpan.value) ?? null);
  /** Shown on the time axis while the gate is on. */
  const shownSpan = computed(() => (gate.value === 'off' ? null : span.value));

  async function askMachine(): Promise<void> {
    const asked = channel.value;
    problem.value = '';
    try {
      const answer = await getQuietSpan(recordingId, asked);
      if (asked !== channel.value) return;
      machineSpan.value = answer.span;
      if (!answer.span) problem.value = 'This channel is silent throughout: there is no noise to go by.';
    } catch {
      problem.value = 'The quiet span could not be fetched. Switch the gate off and on to try again.';
    }
  }

  function toggleGate(): void {
    if (gate.value === 'off') gate.value = ownSpan.value ? 'span' : 'machine';
    else gate.value = 'off';
  }

  function takeSpan({ startSample, endSample }: TimeWindow): void {
    ownSpan.value = { startSample, endSample };
    gate.value = 'span';
  }

  function takeMachine(): void {
    ownSpan.value = null;
    gate.value = 'machine';
  }

  watch(channel, () => (machineSpan.value = undefined));
  watch([gate, channel], () => {
    problem.value = '';
    if (gate.value === 'machine' && (machineSpan.value ?? null) === null) void askMachine();
  });

  return { span, shownSpan, problem, toggleGate, takeSpan, takeMachine };
}
