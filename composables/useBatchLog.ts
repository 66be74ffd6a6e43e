import { computed, ref, shallowRef, watch } from 'vue'
import type { BatchList, BatchListItem } from '#shared/schemas/batches'
import { failureOf } from '~/composables/useThing'
import { callApi, toFailure } from '~/utils/api'
import { batchFilters, mergePages, type BatchFilterName, type KeptRows } from '~/utils/batch-log'

/** Rows of one set of filters, kept while other pages are looked at, so that the way back ends where it began. */
interface Kept extends KeptRows<BatchListItem> {
  key: string
}

/** The log: filters and the open batch stand in the address; more pages come below and stay when one returns. */
export function useBatchLog() {
  const route = useRoute()
  const key = computed(() => JSON.stringify(batchFilters.flatMap((name) => {
    const value = route.query[name]
    return typeof value === 'string' && value !== '' ? [[name, value]] : []
  })))
  // Made of the text, so that opening a batch, which changes the address too, does not read the list again.
  const filters = computed(() => Object.fromEntries(JSON.parse(key.value) as [BatchFilterName, string][]) as Partial<Record<BatchFilterName, string>>)
  const openId = computed(() => (typeof route.query.open === 'string' ? route.query.open : null))
  const kept = useState<Kept | null>('batch-log', () => null)
  const { data, error, status, refresh } = useFetch<BatchList>('/api/batches', { query: filters })
  const shownBefore = shallowRef<BatchListItem[]>([])
  const moreBusy = ref(false)
  const moreFailure = ref<string | null>(null)

  const keptHere = () => (kept.value?.key === key.value ? kept.value : null)
  const rows = computed<KeptRows<BatchListItem> | null>(() => keptHere() ?? (status.value === 'success' ? data.value as BatchList | undefined ?? null : null))
  const pending = computed(() => status.value === 'pending' || status.value === 'idle')
  /** While other rows are read, the last ones stay. */
  const items = computed(() => rows.value?.items ?? (pending.value ? shownBefore.value : []))
  // Only what was read sets what is kept: rows follow it, and must not lead it too.
  watch([data, status], () => {
    if (status.value !== 'success' || !data.value) return
    const merged = mergePages(data.value as BatchList, keptHere())
    shownBefore.value = merged.items
    kept.value = { key: key.value, items: merged.items, nextCursor: merged.nextCursor }
  }, { immediate: import.meta.client })

  const go = (query: Record<string, unknown>) => void navigateTo({ query: query as Record<string, string> }, { replace: true })

  /** Sets or, with an empty value, clears one filter; the address follows. */
  function filter(name: string, value: string): void {
    const { [name]: _before, ...rest } = route.query
    go(value === '' ? rest : { ...rest, [name]: value })
  }
  function clear(): void {
    go(Object.fromEntries(Object.entries(route.query).filter(([name]) => !(batchFilters as readonly string[]).includes(name))))
  }
  /** Opens a batch beside the list, or none. */
  const open = (id: string | null): void => filter('open', id ?? '')

  /** Reads the next page and puts it under what is there. */
  async function more(): Promise<void> {
    const cursor = rows.value?.nextCursor
    if (!cursor || moreBusy.value) return
    moreBusy.value = true
    moreFailure.value = null
    const asked = key.value
    try {
      const page = await callApi<BatchList>('/api/batches', { query: { ...filters.value, cursor } })
      if (asked === key.value) kept.value = { key: asked, items: [...rows.value?.items ?? [], ...page.items], nextCursor: page.nextCursor }
    } catch (fault) {
      moreFailure.value = toFailure(fault).message
    } finally {
      moreBusy.value = false
    }
  }

  return {
    items, filters, openId, filter, clear, open, more, moreBusy, moreFailure, pending,
    hasMore: computed(() => rows.value !== null && rows.value.nextCursor !== null),
    failure: computed(() => failureOf(error.value)?.message ?? null),
    filtered: computed(() => Object.keys(filters.value).length > 0),
    refresh: () => refresh(),
  }
}
