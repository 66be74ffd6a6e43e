import type * as z from 'zod/mini'
import { safeParse } from 'zod/mini'
import { computed, nextTick, reactive, ref, shallowRef, toRaw, type ComputedRef, type Ref, type ShallowRef } from 'vue'
import { newUuid } from '#shared/utils/uuid'
import { useKeptForm } from '~/composables/useKeptForm'
import { toFailure, type ApiFailure } from '~/utils/api'
import { changedFields, conflictsOf, type FieldConflict } from '~/utils/form-conflict'

/** Somebody saved the same thing first. */
export interface FormConflict {
  fields: FieldConflict[]
  /** Who and when, where the server knows it. */
  name: string | null
  at: string | null
}

interface FormOptions<T> {
  /** Turns the fields into what the schema takes; the fields themselves where not given. */
  body?: (values: T) => unknown
  /** Name under which unsaved fields stay in this tab over a reload. Not for forms that hold a secret. */
  keep?: string
  /** Turns the thing of a version conflict's answer into fields, with its `version`. */
  read?: (current: unknown) => T
}

interface Form<T extends Record<string, unknown>> {
  /** What the fields hold; never cleared by a failure. */
  values: T
  /** What they held when the form was opened. */
  start: Readonly<Ref<T>>
  /** What is wrong, by field path. */
  errors: Ref<Record<string, string>>
  /** What is wrong with the whole, where no field is to blame. */
  failure: Ref<string | null>
  busy: Ref<boolean>
  /** Fields that were changed. */
  changed: ComputedRef<string[]>
  /** True when fields of an earlier visit were put back. */
  restored: Readonly<Ref<boolean>>
  conflict: Ref<FormConflict | null>
  submit: () => Promise<void>
  /** Puts the fields back to what they held at the start. */
  discard: () => void
  /** Ends a conflict: theirs for the named fields, ours for the others, and saves. */
  settle: (theirs: readonly string[]) => Promise<void>
}

/** A saving that only meets other people's pours is tried again so often before somebody is asked. */
const quietRetries = 3

/**
 * A form over one schema: checked here before it is sent, and the server's refusals land beside the same fields.
 *
 * @param schema the route's own body schema
 * @param initial what the fields hold at first
 * @param send gets the parsed body and a key that stays the same while the body does, so that sending again after a lost
 *   answer does not do it twice; what it throws is shown and nothing is lost
 */
export function useForm<S extends z.ZodMiniType, T extends Record<string, unknown>>(
  schema: S,
  initial: T,
  send: (body: z.infer<S>, key: string) => Promise<void>,
  options: FormOptions<T> = {},
): Form<T> {
  const values = reactive(structuredClone(initial)) as T
  const start = shallowRef(structuredClone(initial)) as ShallowRef<T>
  const errors = ref<Record<string, string>>({})
  const failure = ref<string | null>(null)
  const busy = ref(false)
  const conflict = shallowRef<FormConflict | null>(null)
  const kept = useKeptForm(options.keep, values, start)
  let theirs: T | null = null
  let sent = { body: '', key: '' }

  function keyOf(body: unknown): string {
    const text = JSON.stringify(body)
    if (sent.body !== text) sent = { body: text, key: newUuid() }
    return sent.key
  }

  async function submit(): Promise<void> {
    if (busy.value) return
    failure.value = null
    const parsed = safeParse(schema, options.body ? options.body(values) : values)
    errors.value = parsed.success ? {} : byPath(parsed.error.issues.map((issue) => ({ path: issue.path.join('.'), message: issue.message })))
    if (!parsed.success) {
      // What is wrong with the whole has no field to stand beside.
      failure.value = parsed.error.issues.find((issue) => issue.path.length === 0)?.message ?? null
      return await showFirstFault()
    }
    busy.value = true
    try {
      await sendOften(parsed.data)
    } finally {
      busy.value = false
    }
  }

  async function sendOften(body: z.infer<S>): Promise<void> {
    for (let attempt = 0; ; attempt++) {
      try {
        await send(body, keyOf(body))
        kept.forget()
        return
      } catch (error) {
        const next = attempt < quietRetries ? take(toFailure(error), body) : null
        if (next === null) return await showFirstFault()
        body = next
      }
    }
  }

  /** Shows what was refused; returns the body to send again where nobody has to be asked. */
  function take(fault: ApiFailure, body: z.infer<S>): z.infer<S> | null {
    const current = fault.code === 'version-conflict' && options.read ? options.read(fault.answer.current) : null
    if (current === null) {
      errors.value = byPath(fault.fields)
      if (fault.fields.length === 0) failure.value = fault.message
      return null
    }
    const fields = conflictsOf(start.value, toRaw(values), current)
    const { name = null, at = null } = (fault.answer.changed ?? {}) as { name?: string | null, at?: string | null }
    theirs = current
    if (fields.length > 0) {
      conflict.value = { fields, name, at }
      return null
    }
    Object.assign(values, { version: current.version })
    return { ...(body as Record<string, unknown>), version: current.version } as z.infer<S>
  }

  async function settle(taken: readonly string[]): Promise<void> {
    if (theirs === null) return
    for (const path of taken) Object.assign(values, { [path]: structuredClone(theirs[path]) })
    Object.assign(values, { version: theirs.version })
    start.value = theirs
    theirs = null
    conflict.value = null
    await submit()
  }

  function discard(): void {
    Object.assign(values, structuredClone(start.value))
    errors.value = {}
    failure.value = null
    conflict.value = null
    kept.forget()
  }

  const changed = computed(() => changedFields(start.value, values))
  return { values, start, errors: computed(() => errors.value), failure, busy, changed, restored: kept.restored, conflict, submit, discard, settle }
}

/** The first fault of each field is enough to mend it. */
function byPath(faults: { path: string; message: string }[]): Record<string, string> {
  return Object.fromEntries([...faults].reverse().map((fault) => [fault.path, fault.message]))
}

/** Takes the keyboard to the first field that is wrong. */
async function showFirstFault(): Promise<void> {
  if (typeof document === 'undefined') return
  await nextTick()
  document.querySelector<HTMLElement>('form :is(input, select, textarea)[aria-invalid="true"]')?.focus()
}
