import { getCurrentInstance, onMounted, ref, toRaw, watch, type Ref, type ShallowRef } from 'vue'
import { useSessionStore } from '~/stores/session'
import { changedFields } from '~/utils/form-conflict'

interface Kept<T> {
  start: T
  values: T
}

/**
 * Keeps the unsaved fields of a form in this tab, by person, and puts them back when the page is opened again.
 *
 * @param name of the form and the thing it is about; undefined keeps nothing
 * @param start what the fields held at first; follows what is put back
 */
export function useKeptForm<T extends Record<string, unknown>>(name: string | undefined, values: T, start: ShallowRef<T>) {
  const restored = ref(false)
  if (name === undefined || !getCurrentInstance()) return { restored: restored as Readonly<Ref<boolean>>, forget: () => {} }
  const key = `potbell-form:${useSessionStore().user?.id ?? 'nobody'}:${name}`

  function forget(): void {
    restored.value = false
    sessionStorage.removeItem(key)
  }

  onMounted(() => {
    const kept = readKept<T>(key)
    if (kept !== null && changedFields(kept.start, kept.values).length > 0) {
      start.value = kept.start
      Object.assign(values, kept.values)
      restored.value = true
    }
    watch(() => JSON.stringify(values), () => {
      if (changedFields(start.value, toRaw(values)).length === 0) return forget()
      sessionStorage.setItem(key, JSON.stringify({ start: start.value, values: toRaw(values) } satisfies Kept<T>))
    })
  })
  return { restored: restored as Readonly<Ref<boolean>>, forget }
}

/** What was kept, or null where there is nothing or it cannot be read any more. */
function readKept<T>(key: string): Kept<T> | null {
  const text = sessionStorage.getItem(key)
  if (text === null) return null
  try {
    return JSON.parse(text) as Kept<T>
  } catch {
    sessionStorage.removeItem(key)
    return null
  }
}
