import { computed, reactive, ref } from 'vue';
import type { z } from 'zod';

/** Checks a draft against the contract of its request: messages by path, shown once somebody tried to send. */
export function useZodForm<Draft extends object, Schema extends z.ZodType>(schema: Schema, start: Draft) {
  const draft = reactive({ ...start }) as Draft;
  const wasTried = ref(false);
  const parsed = computed(() => schema.safeParse(draft));
  const messages = computed<Record<string, string>>(() => {
    if (!wasTried.value || parsed.value.success) return {};
    const byPath: Record<string, string> = {};
    for (const issue of parsed.value.error.issues) byPath[issue.path.join('.')] ??= issue.message;
    return byPath;
  });

  /** The input as the contract has it, or undefined while something is wrong; the messages then show. */
  function check(): z.output<Schema> | undefined {
    wasTried.value = true;
    return parsed.value.success ? parsed.value.data : undefined;
  }

  function reset(next: Draft = start): void {
    Object.assign(draft, next);
    wasTried.value = false;
  }

  return { draft, messages, check, reset };
}
