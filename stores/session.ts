import { defineStore } from 'pinia'
import { computed, ref } from 'vue'
import type { Session } from '#shared/schemas/session'
import { callApi, toFailure } from '~/utils/api'

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
    } catch (error) {
      if (!toFailure(error).passing) throw error
      unreachable.value = true
    }
  }

  /** @throws ApiFailure with the fault beside its field */
  async function signIn(email: string, password: string): Promise<void> {
    session.value = await callApi<Session>('/api/session', { method: 'POST', body: { email, password } })
  }

  /** @throws ApiFailure when the server is not reached: the session then still stands */
  async function signOut(): Promise<void> {
    await callApi('/api/session', { method: 'DELETE' })
    await load()
  }

  return { session, unreachable, user, device, shop, load, signIn, signOut }
})
