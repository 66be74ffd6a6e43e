import { defineEventHandler } from 'h3'
import { useApp } from '../utils/app'

/**
 * The address that the shop is reached under travels with each page: it stands on the cups' labels. A copy of the whole
 * configuration is made for it, which the API's answers do without.
 */
export default defineEventHandler((event) => {
  if (event.path.startsWith('/api/')) return
  useRuntimeConfig(event).public.address = useApp().config.publicUrl ?? ''
})
