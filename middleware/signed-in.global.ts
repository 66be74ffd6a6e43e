import { useSessionStore } from '~/stores/session'
import { routes } from '~/utils/routes'

/** Sends whoever is not known to sign in and brings them back after. The server decides; this only shows the way. */
export default defineNuxtRouteMiddleware((to) => {
  const session = useSessionStore()
  if (to.path === routes.signIn() || to.meta.public || session.unreachable) return
  const screenMay = session.device?.kind === 'screen' && (to.path.startsWith('/screen/') || to.path === routes.home())
  if (session.user?.mustChangePassword && to.path !== routes.me()) return navigateTo({ path: routes.me(), query: to.path === routes.home() ? {} : { to: to.fullPath } })
  if (!session.user && !screenMay) return navigateTo({ path: routes.signIn(), query: to.path === routes.home() ? {} : { to: to.fullPath } })
})
