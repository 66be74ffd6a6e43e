import { computed, ref, watch } from 'vue'
import { failureOf } from '~/composables/useThing'
import { callApi, toFailure } from '~/utils/api'

interface Page<T> {
  items: T[]
  nextCursor: string | null
}

/**
 * A list of the API whose filters stand in the page's address, so that a link or a reload shows the same rows.
 * @param path of the API
 * @param names of the filters that the list knows; anything else in the address is left alone
 * @param fixed what is asked for besides
 */
export function useList<T>(path: string, names: readonly string[], fixed: Record<string, string> = {}) {
  const route = useRoute()
  const filters = computed(() => Object.fromEntries(names.flatMap((name) => {
    const value = route.query[name]
    return typeof value === 'string' && value !== '' ? [[name, value]] : []
  })))
  const query = computed(() => ({ ...fixed, ...filters.value }))
  const { data, error, status, refresh } = useFetch<Page<T>>(path, { query })
  const later = ref<Page<T> | null>(null)
  const moreBusy = ref(false)
  const moreFailure = ref<string | null>(null)

  const items = computed(() => [...data.value?.items ?? [], ...later.value?.items ?? []] as T[])
  const nextCursor = computed(() => (later.value ?? data.value)?.nextCursor ?? null)
  watch(data, () => { later.value = null })

  /** Sets or, with an empty value, clears one filter; the address follows. */
  function filter(name: string, value: string): void {
    const { [name]: _before, ...rest } = route.query
    void navigateTo({ query: value === '' ? rest : { ...rest, [name]: value } }, { replace: true })
  }

  function clear(): void {
    void navigateTo({ query: Object.fromEntries(Object.entries(route.query).filter(([name]) => !names.includes(name))) }, { replace: true })
  }

  /** Reads the next page and puts it under what is there. */
  async function more(): Promise<void> {
    if (nextCursor.value === null || moreBusy.value) return
    moreBusy.value = true
    moreFailure.value = null
    const asked = query.value
    try {
      const page = await callApi<Page<T>>(path, { query: { ...asked, cursor: nextCursor.value } })
      if (asked === query.value) later.value = { items: [...later.value?.items ?? [], ...page.items] as never, nextCursor: page.nextCursor }
    }
    catch (fault) {
      moreFailure.value = toFailure(fault).message
    }
    finally {
      moreBusy.value = false
    }
  }

  return {
    items, filters, filter, clear, more, moreBusy, moreFailure,
    hasMore: computed(() => nextCursor.value !== null),
    pending: computed(() => status.value === 'pending' || status.value === 'idle'),
    failure: computed(() => failureOf(error.value)?.message ?? null),
    filtered: computed(() => Object.keys(filters.value).length > 0),
    refresh: () => refresh(),
  }
}
