import { apart } from '~/utils/sheets'

/** What opens over the wall of a booth at a touch. It hangs there for weeks: it loads without them and fetches them after. */
export const potSheet = apart(() => import('~/components/booth/BoothPotSheet.vue'))
export const silenceSheet = apart(() => import('~/components/booth/BoothSilence.vue'))
export const extractionSheet = apart(() => import('~/components/booth/BoothExtraction.vue'))

/** Fetches all of them, so that they open without network too. */
export const fetchBoothSheets = (): Promise<unknown> => Promise.all([potSheet, silenceSheet, extractionSheet].map(({ fetch }) => fetch()))
