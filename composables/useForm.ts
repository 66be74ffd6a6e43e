import type * as z from 'zod/mini'
import { safeParse } from 'zod/mini'
import { computed, reactive, ref, type Ref } from 'vue'
import { toFailure } from '~/utils/api'

interface Form<T extends Record<string, unknown>> {
  /** What the fields hold; never cleared by a failure. */
  values: T
  /** What is wrong, by field path. */
  errors: Ref<Record<string, string>>
  /** What is wrong with the whole, where no field is to blame. */
  failure: Ref<string | null>
  busy: Ref<boolean>
  submit: () => Promise<void>
}

/**
 * A form over one schema: checked here before it is sent, and the server's refusals land beside the same fields.
 *
 * @param schema the route's own body schema
 * @param initial what the fields hold at first
 * @param send gets the parsed body; what it throws is shown and nothing is lost
 */
export function useForm<S extends z.ZodMiniType, T extends Record<string, unknown>>(
  schema: S,
  initial: T,
  send: (body: z.infer<S>) => Promise<void>,
): Form<T> {
  const values = reactive({ ...initial }) as T
  const errors = ref<Record<string, string>>({})
  const failure = ref<string | null>(null)
  const busy = ref(false)

  async function submit(): Promise<void> {
    if (busy.value) return
    failure.value = null
    const parsed = safeParse(schema, values)
    errors.value = parsed.success ? {} : byPath(parsed.error.issues.map((issue) => ({ path: issue.path.join('.'), message: issue.message })))
    if (!parsed.success) return
    busy.value = true
    try {
      await send(parsed.data)
    } catch (error) {
      const { fields, message } = toFailure(error)
      errors.value = byPath(fields)
      if (fields.length === 0) failure.value = message
    } finally {
      busy.value = false
    }
  }

  return { values, errors: computed(() => errors.value), failure, busy, submit }
}

/** The first fault of each field is enough to mend it. */
function byPath(faults: { path: string; message: string }[]): Record<string, string> {
  return Object.fromEntries([...faults].reverse().map((fault) => [fault.path, fault.message]))
}
