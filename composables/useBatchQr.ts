import { ref, shallowRef, watchEffect, type Ref } from 'vue'
import { labelAddress } from '#shared/utils/cup-label'
import type { QrDrawing } from '~/utils/qr'
import { routes } from '~/utils/routes'

/** Fetches what draws codes, so that it is here before the network can go. */
export const loadQr = (): Promise<typeof import('~/utils/qr')> => import('~/utils/qr')

/** The code of a batch's own page, drawn in the browser; null until it is there. */
export function useBatchQr(batchId: () => string): { qr: Ref<QrDrawing | null>, address: Ref<string>, failed: Ref<boolean> } {
  const { address: publicAddress } = useRuntimeConfig().public
  const origin = publicAddress || useRequestURL().origin
  const qr = shallowRef<QrDrawing | null>(null)
  const address = ref('')
  const failed = ref(false)
  watchEffect(async () => {
    address.value = labelAddress(origin, routes.batch(batchId()))
    const text = address.value
    if (import.meta.server) return
    try {
      qr.value = (await loadQr()).drawQr(text)
    } catch {
      // Without network and never loaded: the label says so in its place.
      failed.value = true
    }
  })
  return { qr, address, failed }
}
