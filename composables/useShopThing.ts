import { computed, ref, shallowRef } from 'vue'
import { may, type Action } from '#shared/utils/permissions'
import { useThing } from '~/composables/useThing'
import { useSessionStore } from '~/stores/session'
import { newThing } from '~/utils/routes'

/**
 * What an editor's page is about: the thing of the address, or nothing yet where a new one is entered.
 *
 * @param path of the API without the id
 * @param action that whoever changes it must be allowed
 */
export function useShopThing<T>(path: string, action: Action) {
  const route = useRoute()
  const session = useSessionStore()
  const id = String(route.params.id)
  const isNew = id === newThing
  const mayWrite = computed(() => session.user !== null && may(session.user.role, action))
  const reading = isNew
    ? { thing: shallowRef<T | null>(null), failure: ref(null), pending: ref(false), refresh: () => Promise.resolve() }
    : useThing<T>(`${path}/${encodeURIComponent(id)}`)
  return { ...reading, isNew, mayWrite }
}
