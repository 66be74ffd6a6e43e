import { effectScope, shallowRef, watch, type Ref } from 'vue'

const held = new Map<string, Ref<unknown>>()

/**
 * A value that this browser keeps, as JSON; the same for all who ask by its key, and for other windows where the storage
 * is theirs too. For pages that are drawn in the browser only.
 *
 * @param initial while nothing is kept, or what is kept cannot be read
 */
export function useKept<T>(storage: Storage, key: string, initial: T): Ref<T> {
  const known = held.get(key) as Ref<T> | undefined
  if (known !== undefined) return known
  const value: Ref<T> = shallowRef(readKept(storage, key, initial))
  held.set(key, value)
  // It outlives whoever asked first.
  effectScope(true).run(() => {
    watch(value, next => storage.setItem(key, JSON.stringify(next)), { flush: 'sync' })
  })
  window.addEventListener('storage', (event) => {
    if (event.storageArea === storage && event.key === key) value.value = readKept(storage, key, initial)
  })
  return value
}

function readKept<T>(storage: Storage, key: string, initial: T): T {
  const text = storage.getItem(key)
  if (text === null) return initial
  try {
    return JSON.parse(text) as T
  } catch (error) {
    // Somebody else wrote it: it is as good as none.
    if (error instanceof SyntaxError) return initial
    throw error
  }
}
