import { may, type Action } from '#shared/utils/permissions'
import { useSessionStore } from '~/stores/session'

/** What the person at this browser may do. The server decides by the same table; screens only hide by it. */
export function useMay(): (action: Action) => boolean {
  const session = useSessionStore()
  return action => session.user !== null && may(session.user.role, action)
}
