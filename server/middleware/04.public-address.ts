import { defineEventHandler } from 'h3'
import { useApp } from '../utils/app'

/** The address that the shop is reached under travels with each page: it stands on the cups' labels. */
export default defineEventHandler((event) => {
  useRuntimeConfig(event).public.address = useApp().config.publicUrl ?? ''
})
