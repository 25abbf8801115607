import { computed, reactive, ref } from 'vue';
import { csvLayoutSchema, rawLayoutSchema } from '@shared/contract/layouts.ts';
import type { DeclaredLayout } from '@shared/contract/layouts.ts';

/** A layout as a form holds it: choices as text, numbers or nothing. */
export interface LayoutDraft {
  kind: DeclaredLayout['kind'];
  encoding: 'signed' | 'unsigned' | 'float' | '';
  bitsPerSample: '8' | '16' | '24' | '32' | '64' | '';
  byteOrder: 'little' | 'big' | '';
  channels: number | null;
  sampleRateHz: number | null;
  headerBytes: number | null;
  /** Of a table: whether its times stand in a column, or their rate is told. */
  clock: 'column' | 'rate' | '';
  timeColumn: number | null;
  timeUnit: 's' | 'ms' | 'us' | 'ns' | '';
  /** Numbers parted by commas. */
  valueColumns: string;
  unit: 'V' | 'mV' | 'uV' | 'full-scale' | '';
}

function emptyDraft(kind: DeclaredLayout['kind']): LayoutDraft {
  return {
    kind,
    encoding: 'signed',
    bitsPerSample: '16',
    byteOrder: 'little',
    channels: 1,
    sampleRateHz: null,
    headerBytes: 0,
    clock: 'column',
    timeColumn: 0,
    timeUnit: 's',
    valueColumns: '1',
    unit: 'V',
  };
}

function parse(draft: LayoutDraft) {
  return draft.kind === 'raw'
    ? rawLayoutSchema.safeParse(toRawInput(draft))
    : csvLayoutSchema.safeParse(toCsvInput(draft));
}

function toRawInput({ kind, encoding, byteOrder, bitsPerSample, ...draft }: LayoutDraft) {
  const { channels, sampleRateHz, headerBytes } = draft;
  return {
    kind,
    encoding,
    byteOrder,
    bitsPerSample: Number(bitsPerSample),
    channels,
    sampleRateHz,
    headerBytes,
  };
}

function toCsvInput({ kind, clock, timeColumn, timeUnit, sampleRateHz, valueColumns, unit }: LayoutDraft) {
  const times = clock === 'column' ? { timeColumn, sampleRateHz: null } : { timeColumn: null, sampleRateHz };
  return { kind, ...times, timeUnit, valueColumns: columnsOf(valueColumns), unit };
}

/** What is no number stays none, so that the contract tells it. */
function columnsOf(text: string): number[] {
  return text
    .split(/[\s,;]+/)
    .filter((part) => part !== '')
    .map(Number);
}

const messageWords: Readonly<Record<string, string>> = {
  channels: 'must be a number from 1 to 64',
  sampleRateHz: 'must be a whole number of hertz from 1 to 20,000,000',
  headerBytes: 'must be a whole number of bytes',
  bitsPerSample: 'must be 8, 16, 24 or 32 for whole numbers, 32 or 64 for floating-point ones',
  timeColumn: 'must be the number of a column',
};

/** The declaration of how samples lie in one file. */
export function useLayoutForm(kind: DeclaredLayout['kind']) {
  const draft = reactive(emptyDraft(kind));
  const wasTried = ref(false);
  const parsed = computed(() => parse(draft));
  const messages = computed<Record<string, string>>(() => {
    if (!wasTried.value || parsed.value.success) return {};
    const byField: Record<string, string> = {};
    for (const { path, message } of parsed.value.error.issues) {
      const field = String(path[0] ?? '');
      byField[field] ??=
        messageWords[field] ?? (field === 'valueColumns' ? columnsWords(message) : 'is needed');
    }
    return byField;
  });

  /** The layout, or undefined while something is wrong; the messages then show. */
  function check(): DeclaredLayout | undefined {
    wasTried.value = true;
    return parsed.value.success ? parsed.value.data : undefined;
  }

  return { draft, messages, check };
}

function columnsWords(message: string): string {
  return message.includes('twice')
    ? 'must name each column once, and not the column of times'
    : 'must be numbers of columns, for example 1, 2';
}
