import { useSessionStore } from '~/stores/session'

/** Every page knows who asks before it is drawn. The server's answer travels with the page. */
export default defineNuxtPlugin(async () => {
  const store = useSessionStore()
  if (!store.session) await store.load()
})
