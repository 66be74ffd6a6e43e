import { computed, toValue, type MaybeRefOrGetter } from 'vue'

interface Failure {
  status: number
  message: string
}

/** What went wrong with a page's own reading, in the server's words where it gave some. */
export function failureOf(error: { statusCode?: number, data?: unknown } | null | undefined): Failure | null {
  if (!error) return null
  const said = (error.data as { message?: unknown } | undefined)?.message
  return {
    status: error.statusCode ?? 0,
    message: typeof said === 'string' ? said : 'The server does not answer. Check the connection; nothing is lost.',
  }
}

/**
 * What a page is about, read on the server first. A refusal becomes the page's own status, so that a missing thing
 * answers 404.
 * @param path of the API
 */
export function useThing<T>(path: MaybeRefOrGetter<string>) {
  const event = useRequestEvent()
  // A key of the page's own: with a shared one the page that a form leads back to would show what the form began with.
  const page = String(useRoute().name)
  const reading = useFetch<T>(path, { key: () => `${page} ${toValue(path)}` })
  const failure = computed(() => failureOf(reading.error.value))
  if (event) {
    void reading.then(() => {
      if (failure.value?.status) setResponseStatus(event, failure.value.status)
    })
  }
  const pending = computed(() => reading.status.value === 'pending' || reading.status.value === 'idle')
  return { thing: reading.data, failure, pending, refresh: () => reading.refresh() }
}
