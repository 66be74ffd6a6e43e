import { defineStore } from 'pinia'
import { computed, ref } from 'vue'
import type { Session } from '#shared/schemas/session'
import { callApi, toFailure } from '~/utils/api'

/** Who was signed in at the bench, for a start without network. No key opens anything by it. */
const lastKey = 'potbell-last-session'

/** Who this browser is. The server decides what that allows; screens only hide by it. */
export const useSessionStore = defineStore('session', () => {
  const session = ref<Session | null>(null)
  /** True when the server could not be asked: what is shown is what was last known. */
  const unreachable = ref(false)

  const user = computed(() => session.value?.user ?? null)
  const device = computed(() => session.value?.device ?? null)
  const shop = computed(() => session.value?.shop ?? null)

  /** Asks the server who this browser is. A server that does not answer leaves the last answer standing. */
  async function load(): Promise<void> {
    try {
      // On the server the browser's cookies have to travel along.
      session.value = import.meta.server ? await useRequestFetch()<Session>('/api/session') : await callApi<Session>('/api/session')
      unreachable.value = false
      if (import.meta.client && session.value.user === null) localStorage.removeItem(lastKey)
    } catch (error) {
      if (!toFailure(error).passing) throw error
      unreachable.value = true
    }
  }

  /** @throws ApiFailure with the fault beside its field */
  async function signIn(email: string, password: string): Promise<void> {
    session.value = await callApi<Session>('/api/session', { method: 'POST', body: { email, password } })
  }

  /** Notes who is signed in, for a bench that starts without network. */
  function keepLast(): void {
    if (session.value?.user) localStorage.setItem(lastKey, JSON.stringify(session.value))
  }

  /** The server cannot be asked: whoever was signed in at this bench stays so. */
  function restoreLast(): void {
    const kept = localStorage.getItem(lastKey)
    if (kept !== null) session.value = JSON.parse(kept) as Session
  }

  /** @throws ApiFailure when the server is not reached: the session then still stands */
  async function signOut(): Promise<void> {
    await callApi('/api/session', { method: 'DELETE' })
    localStorage.removeItem(lastKey)
    await load()
  }

  return { session, unreachable, user, device, shop, load, keepLast, restoreLast, signIn, signOut }
})
