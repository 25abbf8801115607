import { computed, ref, shallowRef } from 'vue';
import { fieldErrors, isProblem } from '@/api/problem-error.ts';

/**
 * Runs the sending of a form once at a time and keeps what the server said: messages for fields, and the error
 * itself where it belongs to no field of the form.
 */
export function useSubmit<Input extends unknown[]>(send: (...input: Input) => Promise<unknown>) {
  const isBusy = ref(false);
  const error = shallowRef<unknown>();
  const fields = computed(() => fieldErrors(error.value));
  const formError = computed(() => {
    const isAllInFields = isProblem(error.value, 'invalid-input') && error.value.fields.length > 0;
    return isAllInFields ? undefined : error.value;
  });

  /** Resolves to true when it was taken. */
  async function submit(...input: Input): Promise<boolean> {
    if (isBusy.value) return false;
    isBusy.value = true;
    error.value = undefined;
    try {
      await send(...input);
      return true;
    } catch (problem) {
      error.value = problem;
      return false;
    } finally {
      isBusy.value = false;
    }
  }

  function clear(): void {
    error.value = undefined;
  }

  return { submit, clear, isBusy, error, fields, formError };
}
